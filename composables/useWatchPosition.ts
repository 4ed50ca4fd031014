/**
 * Keeps where somebody stopped in a film, for whichever device they open it on next. The player says how often. Sent so that it
 * arrives although the page is being left; one that is lost costs a few seconds of film and is not told of.
 */
export function useWatchPosition() {
  const call = $fetch as unknown as (path: string, options: Record<string, unknown>) => Promise<unknown>

  async function keep(mediaId: string, position: { seconds: number, finished: boolean }): Promise<void> {
    await call(`/api/media/${mediaId}/position`, { method: 'POST', body: position, keepalive: true, retry: false }).catch(() => undefined)
  }

  return { keep }
}
