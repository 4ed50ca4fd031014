import { baselineRuns, released, scored, type StoryHead, type StoryPart } from './story-parts'

const north = { bench: 'North', entry: 'Clay radius 12 mm', pipe: 'Stub 300 mm x 38 mm bore' }

/** Layout to the chambers as most of Alder went through them: weeks 3 and 4, the feedback in the words of each evening. */
function linesAndChambers(minutes: number): StoryPart[] {
  const at = (date: string, time: string) => {
    const [hours = 0, min = 0] = time.split(':').map(Number)
    const all = hours * 60 + min + minutes
    return `${date}T${String(Math.floor(all / 60)).padStart(2, '0')}:${String(all % 60).padStart(2, '0')}`
  }
  return [
    scored(40, at('2026-02-24', '18:15'), at('2026-02-24', '19:35')),
    released(50, at('2026-02-24', '19:40'), at('2026-02-24', '20:45'), 'Silas', at('2026-02-24', '21:00'), 'Line is where the dowels say it is, and no seat shows. The first cutter may turn.'),
    released(60, at('2026-02-25', '18:15'), at('2026-02-25', '19:25'), 'Silas', at('2026-02-25', '19:45'), 'Came to the bench and looked along it. Open, flat beside the intake, inside the line. Do the others like it.'),
    scored(60, at('2026-02-25', '20:00'), at('2026-02-26', '18:50')),
  ]
}

function received(minute: number, hold1: { by: string, at: string }): StoryPart[] {
  const two = String(minute).padStart(2, '0')
  return [
    scored(10, `2026-02-10T18:${two}`, `2026-02-10T20:${two}`),
    released(20, `2026-02-11T18:${two}`, `2026-02-11T19:${two}`, hold1.by, hold1.at, 'Clean where heads crack, nothing found, and it held its pressure. Fit to work.'),
  ]
}

const imre: StoryHead = {
  number: 'DNK-0147', student: 'Imre Tallowin', photos: 'all', ...north, pipe: 'Stub 300 mm x 38 mm bore',
  rules: [],
  parts: [
    scored(10, '2026-02-10T18:25', '2026-02-10T19:25', { note: 'Number struck on the flat at the end, not on the deck.' }),
    released(20, '2026-02-10T19:30', '2026-02-10T20:00', 'Silas', '2026-02-10T20:10', 'Clean where heads crack, nothing found, and it held its pressure. Fit to work, Imre.'),
    {
      op: 30, begun: '2026-02-10T20:15', proof: '2026-02-17T19:30', only: { skipSpots: /pushrod aft|roof over hump|short-turn/ },
      sheets: { at: '2026-02-17T20:10', of: baselineRuns(2, '2026-02-10', { intake: '01_tallowin_int_baseline.csv', exhaust: '02_tallowin_exh_baseline.csv' }) },
      asked: '2026-02-17T20:30', note: 'Map still thin on the far pushrod side; ran out of evening.',
      review: { by: 'Marit', at: '2026-02-18T18:10', decision: 'send-back', feedback: 'Runs agree better than most I see. The map stops at the near pushrod face: read the other one, the short turn and the roof over the hump before anybody cuts.' },
    },
    released(30, '2026-02-18T18:30', '2026-02-18T20:50', 'Marit', '2026-02-19T18:25', 'Now we know where the metal is. Three set-ups inside half a per cent: keep working like that.', { note: 'Far pushrod face, short turn and roof added.' }),
    ...linesAndChambers(0),
    released(70, '2026-02-26T19:00', '2026-02-26T20:45', 'Hanne', '2026-02-26T21:05', 'A curve that ends at the seat, and the land is whole all round. Copy it three times; take 12 last.', { proof: '2026-02-26T20:20' }),
    scored(70, '2026-02-28T09:10', '2026-02-28T11:50'),
    scored(90, '2026-02-28T11:55', '2026-02-28T13:10'),
    {
      op: 100, begun: '2026-02-28T13:20', proof: '2026-02-28T13:35',
      sheets: { at: '2026-03-03T19:20', of: [{ file: '03_tallowin_int_bowl.csv' }, { file: '04_tallowin_exh_bowl.csv' }] },
      asked: '2026-03-03T20:00', note: 'Same clay, same stub, same valve as the baseline.',
      review: { by: 'Marit', at: '2026-03-04T18:20', decision: 'release', feedback: 'Gain at every lift, growing the way a bowl makes it. The small exhaust gain is right for now: the hump is still in.' },
    },
    released(110, '2026-03-17T18:20', '2026-03-17T20:25', 'Hanne', '2026-03-17T20:55', 'Least wall 4.3 and level along the row. Take the last millimetre, stop at 3.5, and read again.'),
    scored(110, '2026-03-18T18:10', '2026-03-19T19:50'),
    released(120, '2026-03-19T19:55', '2026-03-21T11:55', 'Hanne', '2026-03-21T12:20', 'Hump is flush and there is still five millimetres over it. Nicely stopped.'),
    scored(130, '2026-03-24T18:30', '2026-03-24T20:30', { sheets: { at: '2026-03-24T20:10', of: [{ file: '05_tallowin_int_port.csv' }, { file: '06_tallowin_exh_port.csv' }] }, note: 'Intake swept from the top down. Exhaust 0.350 was not taken: the bench was needed.' }),
    { op: 140, begun: '2026-03-26T18:40', proof: '2026-03-26T19:05', only: { cylinders: [2], views: [] } },
  ],
}

const bettany: StoryHead = {
  number: 'DNK-0152', student: 'Bettany Crake', photos: 'all', bench: 'South', entry: 'radius plate R15', pipe: 'Stub 300 mm x 38 mm bore',
  rules: [
    { quantity: 'seat-land', ops: [70], cylinder: 1, side: 'intake', spot: '12', value: 1.57 },
    { quantity: 'seat-land', ops: [70], cylinder: 1, side: 'intake', spot: '1:30', value: 1.61 },
    { quantity: 'throat-diameter', ops: [70], cylinder: 1, side: 'intake', value: 36.9 },
  ],
  parts: [
    ...received(20, { by: 'Silas', at: '2026-02-11T19:50' }),
    released(30, '2026-02-12T18:15', '2026-02-17T20:40', 'Marit', '2026-02-18T18:30', 'Bench a shade over its plate, corrected and said so. Good map. Slow down on the fills: the burette does not mind waiting.', {
      sheets: { at: '2026-02-12T20:20', of: baselineRuns(1, '2026-02-12', { intake: '13_crake_int_baseline.csv' }) },
    }),
    ...linesAndChambers(10),
    released(70, '2026-02-26T19:10', '2026-02-26T20:30', 'Hanne', '2026-02-26T20:50', 'Good shape. The land at 12 is nearly used up: nothing more there, and the ball stays below the edge.', { proof: '2026-02-26T20:05' }),
    scored(70, '2026-02-28T09:05', '2026-02-28T11:30'),
    scored(90, '2026-02-28T11:35', '2026-02-28T12:40'),
    {
      op: 100, begun: '2026-02-28T12:50', proof: '2026-02-28T13:05',
      sheets: [
        { at: '2026-03-03T19:40', of: [{ generated: 'bowl', cylinder: 1, side: 'exhaust', date: '2026-03-03' }] },
        { at: '2026-03-04T19:30', of: [{ file: '09_crake_int_bowl_lost_low_lift.csv' }], photos: [{ view: 'view-12', cylinder: 1, side: 'intake', spot: null, note: null }] },
      ],
      asked: '2026-03-04T19:45', note: 'Best top end in the class!',
      review: {
        by: 'Marit', at: '2026-03-05T18:15', decision: 'send-back',
        feedback: 'Bettany, the top is up and it is real. But 1, 2 and 3 mm are down beyond doubt, three neighbours together, and that is the seat. Look at 12 o\'clock under the loupe with Hanne before you touch the port again, and shoot it close with the card in.',
        pins: [
          { view: 'view-12', cylinder: 1, side: 'intake', x: 0.5, y: 0.16, criterion: 'FB-01', text: 'Here, at 12: the corner looks rounded.' },
          { view: 'view-12', cylinder: 1, side: 'intake', x: 0.66, y: 0.24, criterion: 'W-01', text: 'Land nearly used up from 12 to 1:30.' },
        ],
      },
    },
  ],
}

const osricFirst: StoryHead = {
  number: 'DNK-0161', student: 'Osric Pellam', photos: 'all', bench: 'East', entry: 'clay', pipe: 'Stub 300 mm x 38 mm bore', rules: [],
  parts: [
    scored(10, '2026-02-10T18:30', '2026-02-10T19:40'),
    released(20, '2026-02-10T19:45', '2026-02-10T20:30', 'Silas', '2026-02-11T18:15', 'Clean, no indication, held. Go on to the bench.'),
    {
      op: 30, begun: '2026-02-11T18:30', proof: '2026-02-17T19:00', sheets: { at: '2026-02-11T20:15', of: [{ file: '10_pellam_int_baseline_leaking.csv' }] }, asked: '2026-02-17T20:35',
      review: { by: 'Marit', at: '2026-02-18T18:40', decision: 'send-back', feedback: 'The bench reads 6 cfm with the valve shut, Osric: a fifth of your lowest lift. Cure the clay, do not take it off the curve, and run it again.' },
    },
  ],
  stopped: { at: '2026-03-12T19:20', by: 'Hanne', where: 'between the seats, cylinder 3', reason: 'A crack, seat to seat, found while curing the leak. Good find. Nothing is cut on this head; it goes to the sectioning shelf.', scrapped: true },
}

const osricSecond: StoryHead = {
  number: 'DNK-0172', student: 'Osric Pellam', photos: 'all', bench: 'East', entry: 'clay', pipe: 'Stub 300 mm x 38 mm bore', rules: [],
  parts: [
    scored(10, '2026-03-18T18:20', '2026-03-18T20:10'),
    released(20, '2026-03-19T18:10', '2026-03-19T19:40', 'Silas', '2026-03-24T18:20', 'Sound, and cleaner than your first. Baseline it.'),
    { op: 30, begun: '2026-03-24T18:40', proof: '2026-03-26T18:50', only: { quantities: ['throat-diameter', 'gauge-zero', 'wall-thickness'], cylinders: [3], views: ['view-10', 'view-11'] } },
  ],
}

const toHold5 = (minutes: number): StoryPart[] => [
  ...linesAndChambers(minutes),
  released(70, '2026-03-03T18:20', '2026-03-03T20:10', 'Hanne', '2026-03-03T20:40', 'One good bowl. The other three are copies of it; take your time at 12.', { proof: '2026-03-03T19:50' }),
]

const nadia: StoryHead = {
  number: 'DNK-0158', student: 'Nadia Quillfeather', photos: 'all', ...north, rules: [],
  parts: [
    ...received(25, { by: 'Silas', at: '2026-02-11T19:55' }),
    released(30, '2026-02-12T18:20', '2026-02-18T20:20', 'Marit', '2026-02-19T18:35', 'Tight, repeatable, mapped. Off you go.', { sheets: { at: '2026-02-18T20:05', of: baselineRuns(4, '2026-02-18', {}) } }),
    ...toHold5(5),
    scored(70, '2026-03-04T18:10', '2026-03-04T20:30'),
    scored(90, '2026-03-05T18:10', '2026-03-05T19:00'),
    released(100, '2026-03-05T19:05', '2026-03-10T18:30', 'Marit', '2026-03-11T18:30', 'A bowl behaving like a bowl. Go on to the walls.', {
      sheets: { at: '2026-03-10T18:20', of: [{ generated: 'bowl', cylinder: 4, side: 'intake', date: '2026-03-10' }, { generated: 'bowl', cylinder: 4, side: 'exhaust', date: '2026-03-10' }] },
    }),
    released(110, '2026-03-17T18:15', '2026-03-17T19:30', 'Hanne', '2026-03-17T20:10', 'Walls read and level along the row. Last millimetre, then read again.'),
    scored(110, '2026-03-18T18:10', '2026-03-19T20:00'),
    released(120, '2026-03-19T20:05', '2026-03-24T18:50', 'Hanne', '2026-03-24T19:20', 'Flush. Good.'),
    {
      op: 130, begun: '2026-03-25T18:20', sheets: { at: '2026-03-25T19:30', of: [{ generated: 'port', cylinder: 4, side: 'exhaust', date: '2026-03-25' }, { file: '11_quillfeather_int_port_wrong_pressure.csv' }] }, asked: '2026-03-25T19:40',
      review: { by: 'Marit', at: '2026-03-26T18:25', decision: 'send-back', feedback: 'Nadia, every lift of the intake is 0.60 of this casting\'s usual curve, and a port fault never scales them all alike. Was it run at 10 inches of water? Look in your notebook; do not change the sheet. Run it again or tell me what it says.' },
    },
  ],
}

const tomek: StoryHead = {
  number: 'DNK-0149', student: 'Tomek Oake', photos: 'all', ...north, rules: [],
  parts: [
    ...received(30, { by: 'Hanne', at: '2026-02-11T20:00' }),
    released(30, '2026-02-12T18:25', '2026-02-18T20:25', 'Marit', '2026-02-19T18:45', 'Good baseline. Write the time on the plate reading too.', { sheets: { at: '2026-02-18T20:10', of: baselineRuns(1, '2026-02-18', {}) } }),
    ...toHold5(10),
    scored(70, '2026-03-04T18:15', '2026-03-04T20:35'),
    scored(90, '2026-03-05T18:10', '2026-03-05T19:05'),
    {
      op: 100, begun: '2026-03-05T19:10', sheets: { at: '2026-03-05T20:30', of: [{ generated: 'bowl', cylinder: 1, side: 'intake', date: '2026-03-05' }, { file: '12_oake_exh_bowl_transposed.csv' }] }, asked: '2026-03-12T20:10',
      review: { by: 'Marit', at: '2026-03-24T18:05', decision: 'send-back', feedback: 'Tomek, 0.350 in reads under the lift before it, and two digits exchanged would put it back. Look in your notebook and tell me what you see; then take that lift again.' },
    },
  ],
}

const ruth: StoryHead = {
  number: 'DNK-0155', student: 'Ruth Amberlow', photos: 'all', bench: 'West', entry: 'clay', pipe: 'Stub 300 mm x 38 mm bore', rules: [],
  parts: [
    ...received(35, { by: 'Silas', at: '2026-02-11T20:05' }),
    released(30, '2026-02-12T18:30', '2026-02-18T20:30', 'Marit', '2026-02-19T18:55', 'The best repeatability in the school. Your numbers will mean something all term.', { sheets: { at: '2026-02-18T20:15', of: baselineRuns(2, '2026-02-18', {}) } }),
    ...toHold5(15),
    scored(70, '2026-03-04T18:20', '2026-03-19T20:40'),
    scored(90, '2026-03-24T18:10', '2026-03-24T19:40'),
    {
      op: 100, begun: '2026-03-05T18:30', proof: '2026-03-25T19:20',
      sheets: { at: '2026-03-25T20:20', of: [{ generated: 'bowl', cylinder: 2, side: 'exhaust', date: '2026-03-25' }, { file: '14_amberlow_int_bowl_three_runs.tsv' }] }, asked: '2026-03-26T18:10', note: 'Three runs of the intake on one sheet. 7.5 mm of run 2 was lost when the clamp slipped; left out, not filled in.',
    },
  ],
}

const dele: StoryHead = {
  number: 'DNK-0166', student: 'Dele Marchbank', photos: 'all', ...north,
  // The sand core moved when it was poured: each cylinder's pushrod wall is thinner than the one before (handbook 5.1).
  rules: [5.6, 5.3, 5, 4.5].flatMap((value, index) => [
    { quantity: 'wall-thickness', ops: [30], cylinder: index + 1, side: 'intake' as const, spot: 'pushrod fore, station 30, height 0', value },
    { quantity: 'wall-thickness', ops: [110], cylinder: index + 1, side: 'intake' as const, spot: 'pushrod fore, station 30, height 0', value: [4.7, 4.4, 4.1, 3.6][index] ?? 0 },
    ...['20, height -8', '20, height 0', '20, height +8', '30, height -8', '30, height +8', '40, height -8', '40, height 0', '40, height +8'].map((station, nth) => ({
      quantity: 'wall-thickness', ops: [110], cylinder: index + 1, side: 'intake' as const, spot: `pushrod fore, station ${station}`, value: ([4.7, 4.4, 4.1, 3.6][index] ?? 0) + 0.2 + 0.05 * (nth % 4),
    })),
    ...['20', '30', '40'].flatMap(station => ['-8', '0', '+8'].map(height => ({
      quantity: 'wall-thickness', ops: [110], cylinder: index + 1, side: 'intake' as const, spot: `pushrod aft, station ${station}, height ${height}`, value: [4.8, 5, 5.3, 5.7][index] ?? 0,
    }))),
  ]),
  parts: [
    ...received(40, { by: 'Hanne', at: '2026-02-11T20:10' }),
    released(30, '2026-02-12T18:35', '2026-02-18T20:35', 'Marit', '2026-02-19T19:05', 'Thorough map. Look at how the near pushrod face changes along the row.', { sheets: { at: '2026-02-18T20:20', of: baselineRuns(1, '2026-02-18', {}) } }),
    ...toHold5(20),
    scored(70, '2026-03-04T18:25', '2026-03-04T20:40'),
    scored(90, '2026-03-05T18:15', '2026-03-05T19:10'),
    released(100, '2026-03-05T19:15', '2026-03-10T18:45', 'Marit', '2026-03-11T18:45', 'Believable gains, nothing lost.', {
      sheets: { at: '2026-03-10T18:35', of: [{ generated: 'bowl', cylinder: 1, side: 'intake', date: '2026-03-10' }, { generated: 'bowl', cylinder: 1, side: 'exhaust', date: '2026-03-10' }] },
    }),
    { op: 110, begun: '2026-03-25T18:15', asked: '2026-03-26T18:40', proof: '2026-03-26T18:20', note: 'Plan: stop at 3.2 on cylinder 4.' },
  ],
}

const wen: StoryHead = {
  number: 'DNK-0163', student: 'Wen Sallis', photos: 'all', ...north, rules: [],
  parts: [
    ...received(45, { by: 'Silas', at: '2026-02-11T20:15' }),
    {
      op: 30, begun: '2026-02-12T18:40', proof: '2026-03-12T19:30', sheets: { at: '2026-02-12T20:00', of: [{ file: '17_sallis_int_baseline_lift_zero.csv' }] }, asked: '2026-03-17T20:00', note: 'Back from two weeks away.',
      review: { by: 'Marit', at: '2026-03-18T18:05', decision: 'send-back', feedback: 'Welcome back, Wen. The line through your lowest lifts meets zero flow at 0.31 mm: the dial was zeroed on a valve that was not home. It would hand you a false gain later. Seat it, tap the stem, zero, run again, both sides, three set-ups.' },
    },
    { op: 30, begun: '2026-03-24T18:30', sheets: { at: '2026-03-26T19:10', of: [{ generated: 'base', cylinder: 1, side: 'intake', run: 1, date: '2026-03-26' }] }, proof: null, note: 'Rerun after the lift zero.' },
  ],
}

/** The story of Alder up to the demo's instant, head by head. */
export const story: readonly StoryHead[] = [imre, bettany, osricFirst, osricSecond, nadia, tomek, ruth, dele, wen]
