/** Where the demo stands: the handbook's clock A, by the school's wall clock. */
export const demoInstant = '2026-03-26T19:40'
