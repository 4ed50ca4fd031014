/**
 * Instants a test's school may be seeded to, by the school's wall clock: `test.use({ until: imreHold5 })`.
 * Seeding takes the longest, so one instant serves several walks where it can.
 */

/**
 * Imre's flow check after bowl (op 100, Hold 5) is begun: everything before it is in and scored, Holds 1 to 4 released, baseline
 * sheets 01 and 02 in, set-up photo and plate readings of op 100 in, no sheet of op 100 yet. His sheets 03 and 04 are of the next evening.
 */
export const imreHold5 = '2026-03-02T12:00'

/** Nadia, Tomek, Ruth and Dele have their chambers done and no draft of the first bowl (op 70) yet. */
export const firstBowls = imreHold5

/**
 * As for Imre, for Bettany: cylinder 1, baseline sheet 13 and a generated exhaust baseline, and the exhaust run after bowl in
 * (generated). Her sheet 09 is of that evening.
 */
export const bettanyHold5 = '2026-03-04T12:00'
