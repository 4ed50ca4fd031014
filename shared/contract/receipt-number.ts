/** A receipt's number as it is printed: 123 is "S-000123". */
export function receiptNumber(number: number): string {
  return `S-${String(number).padStart(6, '0')}`
}
