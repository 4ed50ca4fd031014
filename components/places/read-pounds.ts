/** Pounds as typed, "350", "2,100.00" or "£25.50", in pence; null when it is no amount. Read by digits: 0.29 × 100 is not 29 to a computer. */
export function readPounds(text: string): number | null {
  const found = /^£?\s*(\d{1,3}(?:,\d{3})+|\d{1,7})(?:\.(\d{1,2}))?$/.exec(text.trim())
  if (!found) return null
  return Number(found[1]!.replaceAll(',', '')) * 100 + Number((found[2] ?? '').padEnd(2, '0'))
}

/** Pence as one types them: 35000 is "350.00". */
export const typedPounds = (minor: number): string => `${Math.trunc(minor / 100)}.${String(minor % 100).padStart(2, '0')}`
