/** A head worked before the program was there: its route is carried over from the paper card, with the sheets that were kept. */
export interface PaperHead { number: string, student: string, from: string, until: string, sheets: { op: number, at: string, file: string }[] }

export const paperNote = 'Carried over from the paper route card. Proof from before the program is not here.'

/** Bramble, autumn 2025. */
export const paperHeads: readonly PaperHead[] = [
  { number: 'DNK-0101', student: 'Freya Dunmallet', from: '2025-09-22T10:00', until: '2025-12-17T15:00', sheets: [] },
  { number: 'DNK-0102', student: 'Callum Thrapp', from: '2025-09-22T10:05', until: '2025-12-17T15:10', sheets: [] },
  { number: 'DNK-0103', student: 'Joss Ivelle', from: '2025-09-22T10:10', until: '2025-12-17T15:20', sheets: [{ op: 30, at: '2025-09-23T15:30', file: '15_ivelle_int_baseline_corrected_twice.csv' }] },
  { number: 'DNK-0107', student: 'Parveen Loder', from: '2025-09-22T10:15', until: '2025-12-17T15:30', sheets: [{ op: 150, at: '2025-11-25T14:30', file: '16_loder_int_shortturn_bench_limit.csv' }] },
  { number: 'DNK-0109', student: 'Mateus Corrigill', from: '2025-09-22T10:20', until: '2025-12-17T15:40', sheets: [{ op: 30, at: '2025-09-24T15:00', file: '20a_corrigill_exh_baseline_no_pipe.csv' }, { op: 100, at: '2025-10-15T14:00', file: '20b_corrigill_exh_bowl_with_pipe.csv' }] },
]
