/** Length and size of a film as this browser reads them; nothing where it cannot play it. */
export function filmFacts(file: File): Promise<{ durationSeconds?: number, width?: number, height?: number }> {
  if (!file.type.startsWith('video/')) return Promise.resolve({})
  const address = URL.createObjectURL(file)
  const video = document.createElement('video')
  video.preload = 'metadata'
  return new Promise<{ durationSeconds?: number, width?: number, height?: number }>((resolve) => {
    // A browser that never answers must not keep the film here.
    const timer = setTimeout(() => resolve({}), 5000)
    const answer = (facts: { durationSeconds?: number, width?: number, height?: number }) => {
      clearTimeout(timer)
      resolve(facts)
    }
    video.onerror = () => answer({})
    video.onloadedmetadata = () => answer({
      ...(Number.isFinite(video.duration) ? { durationSeconds: video.duration } : {}),
      ...(video.videoWidth > 0 && video.videoHeight > 0 ? { width: video.videoWidth, height: video.videoHeight } : {}),
    })
    video.src = address
  }).finally(() => URL.revokeObjectURL(address))
}
