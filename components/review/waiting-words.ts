/** How long somebody has waited, in words short enough for a list. */
export function waitingWords(minutes: number): string {
  if (minutes < 60) return `${Math.max(0, Math.round(minutes))} min`
  if (minutes < 48 * 60) return `${Math.round(minutes / 60)} h`
  return `${Math.round(minutes / 60 / 24)} days`
}
