import { describe, expect, it } from 'vitest'
import { decodeSheetBytes } from '#shared/domain/airflow/sheet/decode-sheet-bytes'
import { readFlowSheet } from '#shared/domain/airflow/sheet/read-flow-sheet'
import type { BenchProfile, SheetReading } from '#shared/domain/airflow/sheet/sheet-reading'
import { splitDelimitedText } from '#shared/domain/airflow/sheet/split-delimited-text'
import { readFileSync } from 'node:fs'
import { dunnock, expectedSheets, readSheetText } from '../../fixtures/sheets/read-fixture'

const profiles = (JSON.parse(readFileSync(new URL('../../../content/school/bench-profiles.json', import.meta.url), 'utf8')) as { profiles: BenchProfile[] }).profiles

/** Flow by lift of one run, to a tenth. */
const curve = (reading: SheetReading, run = 0) => Object.fromEntries((reading.runs[run]?.points ?? []).map(point => [point.liftMm.toFixed(2), Number(point.cfm28.toFixed(1))]))
const codes = (reading: SheetReading) => reading.findings.map(finding => finding.code)
const fields = (reading: SheetReading) => reading.needs.map(need => need.field)

/** Header lines that leave nothing to ask but what the test is about. */
const rest = 'Bench,North\nDate,2026-04-02\nHead,DNK-0103\nCylinder,1\nPort side,Intake\nStage,Baseline\nValve,41.0 mm\nStem,8.0 mm\n'

/** Factor from one test pressure to 28 inH2O of 249.08891 Pa each. */
const to28 = (pressurePa: number) => Math.sqrt(28 * 249.08891 / pressurePa)

describe('units of every bench', () => {
  // Each is 50 cfm at 28 inH2O and 5 mm, by hand: 50 cfm = 23.597 l/s = 1415.84 l/min = 84.951 m3/h = 102.289 kg/h at 1.2041.
  it.each([
    ['cfm', '50.0', 50], ['l/s', '23.597', 50], ['l/min', '1415.84', 50], ['m3/h', '84.951', 50], ['m\u00B3/h', '84.951', 50], ['kg/h', '102.289', 50], ['litres per second', '23.597', 50],
  ])('reads flow in %s', (unit, written, cfm) => {
    const reading = readSheetText(`${rest}Test pressure,28 inH2O\n\nLift mm,Flow (${unit})\n3,${written}\n5,${written}\n7,${written}\n`)
    expect(fields(reading)).toEqual([])
    expect(curve(reading)['5.00']).toBeCloseTo(cfm, 1)
  })
  it.each([
    ['10 inH2O', 2490.8891], ['250 mmH2O', 2451.6625], ['25 cm H2O', 2451.6625], ['2.5 kPa', 2500], ['2500 Pa', 2500], ['25 mbar', 2500], ['25 hPa', 2500], ['10 in. of water', 2490.8891], ['10" WC', 2490.8891],
  ])('reads a test pressure of %s', (written, pascals) => {
    const reading = readSheetText(`${rest}Test pressure: ${written}\n\nLift mm,Flow cfm\n3,30\n5,50\n7,60\n`)
    expect(fields(reading)).toEqual([])
    expect(reading.runs[0]?.points[1]?.cfm28).toBeCloseTo(50 * to28(pascals), 6)
  })
  it.each([['in', '0.2'], ['thou', '200'], ['0.001 in', '200'], ['mm', '5.08'], ['cm', '0.508'], ['lift/D', '0.123902']])('reads lift in %s', (unit, written) => {
    const heading = unit === 'lift/D' ? 'Lift/D' : `Lift (${unit})`
    const lifts = [0.5, 1, 1.5].map(times => Number((Number(written) * times).toPrecision(6)))
    const reading = readSheetText(`${rest}Test pressure,28 inH2O\n\n${heading},Flow cfm\n${lifts.map((lift, i) => `${lift},${30 + 20 * i}`).join('\n')}\n`)
    expect(curve(reading)['5.08']).toBe(50)
  })
  it('reads a share of a range by its full-scale table, in per cent and thousandths', () => {
    const head = `${rest}Test pressure,28 inH2O\n"Full scale in cfm at 28 inH2O: A is 50, B is 100"\n`
    expect(curve(readSheetText(`${head}\nLift mm,Range,% of range\n1,A,36\n3,A,90\n5,B,66\n`))).toEqual({ '1.00': 18, '3.00': 45, '5.00': 66 })
    expect(curve(readSheetText(`${head}\nLift mm,Range,Thousandths of full scale\n1,A,360\n3,A,900\n5,B,660\n`))).toEqual({ '1.00': 18, '3.00': 45, '5.00': 66 })
  })
  it('reads the unit beside the numbers, or from a line of the header', () => {
    expect(curve(readSheetText(`${rest}Test pressure,28 inH2O\n\nLift,Flow\n1 mm,18.0 cfm\n3 mm,50.0 cfm\n5 mm,70.0 cfm\n`))).toEqual({ '1.00': 18, '3.00': 50, '5.00': 70 })
    expect(curve(readSheetText(`${rest}Test pressure,28 inH2O\n"Lifts in mm, flow in cfm"\n\nLift,Flow\n1,18.0\n3,50.0\n5,70.0\n`))).toEqual({ '1.00': 18, '3.00': 50, '5.00': 70 })
  })
})

describe('what a sheet does not say', () => {
  it('asks for every unit, and gives no points until it knows', () => {
    const reading = readSheetText(`${rest}\nLift,Pressure,Flow\n1,28,18\n3,28,50\n5,28,70\n`)
    expect(fields(reading).sort()).toEqual(['flow-unit', 'lift-unit', 'pressure-unit'])
    expect(reading.runs).toEqual([])
  })
  it('takes the answers, and still keeps what the sheet says', () => {
    const text = `${rest}\nLift,Pressure,Flow\n1,28,18\n3,28,50\n5,28,70\n`
    const reading = readSheetText(text, { answers: { 'lift-unit': 'mm', 'flow-unit': 'cfm', 'pressure-unit': 'inH2O' } })
    expect(fields(reading)).toEqual([])
    expect(curve(reading)).toEqual({ '1.00': 18, '3.00': 50, '5.00': 70 })
  })
  it('takes chosen columns over headings, and passes over a unit of the wrong kind', () => {
    const text = `${rest}Test pressure,28 inH2O\n\nLift,Flow\n1,18\n3,50\n5,70\n`
    expect(curve(readSheetText(text, { columns: { 0: { unit: 'mm' }, 1: { unit: 'cfm' } } }))).toEqual({ '1.00': 18, '3.00': 50, '5.00': 70 })
    expect(fields(readSheetText(text, { columns: { 0: { unit: 'mm' }, 1: { unit: 'Pa' } } }))).toEqual(['flow-unit'])
  })
  it('asks for all it must know of an empty file, a table of nothing and a sheet of two columns', () => {
    expect(fields(readSheetText(''))).toEqual(['columns', 'valve', 'stem', 'bench', 'stage', 'date'])
    expect(readSheetText('a,b,c\n1,2,3\n').runs).toEqual([])
    expect(fields(readSheetText('Lift mm,Flow l/s\n1,2\n2,4\n3,6\n')).sort()).toEqual(['bench', 'cylinder', 'date', 'pressure', 'side', 'stage', 'stem', 'valve'])
  })
  it('asks which of day and month comes first only where both could', () => {
    expect(fields(readSheetText(`${rest.replace('2026-04-02', '05/03/26')}Test pressure,28 inH2O\n\nLift mm,cfm\n1,18\n3,50\n5,70\n`))).toEqual(['date'])
    for (const [written, iso] of [['25/03/26', '2026-03-25'], ['03/25/2026', '2026-03-25'], ['04.03.2026', '2026-03-04'], ['3 March 2026', '2026-03-03'], ['05/05/2026', '2026-05-05'], ['2026/3/4', '2026-03-04']]) {
      expect(readSheetText(`${rest.replace('2026-04-02', written ?? '')}Test pressure,28 inH2O\n\nLift mm,cfm\n1,18\n3,50\n5,70\n`).header.date).toBe(iso)
    }
  })
  it('takes from the bench\'s profile what the sheet leaves out, and nothing it says itself', () => {
    const text = `${rest.replace('North', 'East')}\nLift,Scale,Thousandths of full scale\n50,A,616.0\n100,B,554.5\n150,B,776.5\n`
    expect(fields(readSheetText(text))).toContain('lift-unit')
    const reading = readSheetText(text, { profiles })
    expect(fields(reading)).toEqual([])
    // 0.616 x 28 cfm at 10 inH2O.
    expect(curve(reading)['1.27']).toBeCloseTo(0.616 * 28 * Math.sqrt(2.8), 1)
    expect(reading.columns[0]).toMatchObject({ unit: 'thou', unitFrom: 'profile' })
  })
})

describe('forms of a sheet', () => {
  it('reads semicolons, decimal commas, points for thousands, a byte-order mark and CRLF', () => {
    const reading = readSheetText('\uFEFFBench;South\r\nDate;04.03.2026\r\nPart;DNK-0152 cyl 1;Side;IN\r\nState;bowl done\r\nValve (mm);41,0;Stem (mm);8,0\r\nTest pressure;2,5 kPa\r\nAir;22,2 C;1.007,6 hPa;50 % RH\r\n\r\nLift (mm);Flow (l/min)\r\n2;600,5\r\n4;1.192,0\r\n6;1.713,8\r\n')
    expect(reading.header).toMatchObject({ barometerHpa: 1007.6, temperatureC: 22.2, humidity: 50, valveMm: 41 })
    expect(reading.runs[0]?.points[1]?.cfm28).toBeCloseTo(1192 / 28.316846592 * to28(2500) * Math.sqrt(reading.header.airDensity / 1.2041), 6)
    expect(fields(reading)).toEqual([])
  })
  it('reads an older 8-bit file as it was meant', () => {
    const bytes = Uint8Array.from('Temp (\u00B0C);21,0 \u00B1 0,5'.split('').map(letter => letter.charCodeAt(0)))
    expect(decodeSheetBytes(bytes)).toBe('Temp (°C);21,0 ± 0,5')
    expect(decodeSheetBytes(new TextEncoder().encode('21 °C'))).toBe('21 °C')
  })
  it('reads rows downward, marks beside numbers, and each way of writing that nothing was read', () => {
    const reading = readSheetText(`${rest}Test pressure,28 inH2O\n\nLift mm,Flow cfm,Note\n6,81.0,\n5,70.0 *,\n4,-,\n3,n/a,slipped\n2.5,,\n2,0,\n1,18.0,\nMean,60,\nTotal,300,\n`)
    expect(curve(reading)).toEqual({ '1.00': 18, '5.00': 70, '6.00': 81 })
    expect(reading.runs[0]?.missing.map(gap => gap.liftMm)).toEqual([2, 2.5, 3, 4])
    expect(reading.runs[0]?.missing[2]?.reason).toBe('slipped')
    expect(codes(reading)).toContain('note-in-cell')
  })
  it('sees a row that was left out of an even ladder', () => {
    const reading = readSheetText(`${rest}Test pressure,28 inH2O\n\nLift mm,Flow cfm\n1,17.5\n2,34.5\n3,50.5\n5,78.0\n6,90.0\n7,99.0\n`)
    expect(reading.findings.filter(finding => finding.code === 'missing-point').map(finding => finding.lifts)).toEqual([[4]])
  })
  it('reads repeats side by side, stacked, by a column, or as least, mean and most', () => {
    const head = `${rest}Test pressure,28 inH2O\n\n`
    const wanted = { '1.00': 18, '3.00': 50, '5.00': 70 }
    const side = readSheetText(`${head},Run 1,Run 2,\nLift mm,cfm,cfm,Mean cfm\n1,17.9,18.1,99\n3,49.9,50.1,99\n5,69.9,70.1,99\n`)
    const stacked = readSheetText(`${head}Run 1\nLift mm,cfm\n1,17.9\n3,49.9\n5,69.9\nRun 2\nLift mm,cfm\n1,18.1\n3,50.1\n5,70.1\n`)
    const again = readSheetText(`${head}Lift mm,cfm\n1,17.9\n3,49.9\n5,69.9\n1,18.1\n3,50.1\n5,70.1\n`)
    const column = readSheetText(`${head}Run,Lift mm,cfm\n1,1,17.9\n1,3,49.9\n1,5,69.9\n2,1,18.1\n2,3,50.1\n2,5,70.1\n`)
    for (const reading of [side, stacked, again, column]) {
      expect(curve(reading)).toEqual(wanted)
      expect(reading.runs[0]?.repeats).toHaveLength(2)
      expect(codes(reading)).toContain('several-runs')
    }
    const spread = readSheetText(`${head}Lift mm,Min cfm,Mean cfm,Max cfm\n1,17.0,18.0,19.5\n3,49,50,51\n5,69,70,71\n`)
    expect(curve(spread)).toEqual(wanted)
    expect(spread.runs[0]?.repeats).toBeUndefined()
  })
  it('averages the few lifts of a down-sweep and says so', () => {
    const reading = readSheetText(`${rest}Test pressure,28 inH2O\n\nLift mm,cfm\n1,18\n2,34\n3,50\n4,62\n5,70\n6,78\n4,63\n`)
    expect(curve(reading)['4.00']).toBe(62.5)
    expect(reading.findings.find(finding => finding.code === 'lift-read-twice')?.lifts).toEqual([4])
  })
  it('reads two ports of one table, and cylinders under two heading rows', () => {
    const reading = readSheetText(`${rest.replace('Port side,Intake\n', '').replace('Cylinder,1\n', '')}Test pressure,28 inH2O\n\n,Cylinder 1,,Cylinder 2,\nLift mm,Int cfm,Exh cfm,Int cfm,Exh cfm\n1,18,15,18.2,15.2\n3,50,40,50.2,40.2\n5,70,55,70.2,55.2\n`)
    expect(reading.runs.map(run => [run.cylinder, run.side, run.points[2]?.cfm28])).toEqual([[1, 'intake', 70], [1, 'exhaust', 55], [2, 'intake', 70.2], [2, 'exhaust', 55.2]].map(([cylinder, side, cfm]) => [cylinder, side, expect.closeTo(cfm as number, 6)]))
    expect(fields(reading)).toEqual([])
  })
  it('reads a header below its table, and a table laid on its side', () => {
    const below = readSheetText(`Lift mm,Flow cfm\n1,18\n3,50\n5,70\n\n${rest}Test pressure,28 inH2O\n`)
    expect(below.header).toMatchObject({ bench: 'North', stage: 'base', valveMm: 41 })
    expect(below.runs[0]?.cylinder).toBe(1)
    expect(curve(readSheetText(`${rest}Test pressure,28 inH2O\n\nLift mm,1,3,5,6\nFlow cfm,18,50,70,77\n`))).toEqual({ '1.00': 18, '3.00': 50, '5.00': 70, '6.00': 77 })
  })
  it('reads a header of sentences', () => {
    const reading = readSheetText('"Head DNK-0171 - cyl 4 - exhaust - after bowl, tested 3 March 2026 by P. Loder on the North bench"\n"Valve 34.0 mm / stem 8.0 mm / 45 deg seat / throat 29.6 mm"\n"Pressure 28"" H2O throughout, air was 19.5 C, 1011 mb and 44 % humidity, plate 150.0 nominal 149.7 today (cfm)"\n"Leak 0.4 cfm with the valve shut"\nLift (in),Flow (cfm)\n.05,18.4\n.10,36.6\n.15,53.4\naverage,36.1\n')
    expect(reading.header).toMatchObject({ head: 'DNK-0171', stage: 'bowl', date: '2026-03-03', operator: 'P. Loder', bench: 'North', valveMm: 34, stemMm: 8, seatDeg: 45, throatMm: 29.6, temperatureC: 19.5, barometerHpa: 1011, humidity: 44 })
    expect(reading.header.plateRatio).toBeCloseTo(0.998, 6)
    expect(reading.runs[0]).toMatchObject({ cylinder: 4, side: 'exhaust' })
    expect(fields(reading)).toEqual([])
  })
  it('does not bring to 28 what already is, where the heading or the header says so', () => {
    const head = `${rest}Test pressure,10 inH2O\n`
    expect(curve(readSheetText(`${head}\nLift mm,Flow at 28 inH2O (cfm)\n1,18\n3,50\n5,70\n`))['3.00']).toBe(50)
    expect(curve(readSheetText(`${head}"Flow basis, corrected to 28 inH2O"\n\nLift mm,Flow cfm\n1,18\n3,50\n5,70\n`))['3.00']).toBe(50)
    expect(curve(readSheetText(`${head}Flow basis,not corrected to 28\n\nLift mm,Flow cfm\n1,18\n3,50\n5,70\n`))['3.00']).toBeCloseTo(50 * Math.sqrt(2.8), 1)
    // Both columns: the one as read is used, with its own pressure.
    expect(curve(readSheetText(`${head}\nLift mm,Flow as read (cfm),Flow @28 (cfm)\n1,10.8,99\n3,29.9,99\n5,41.8,99\n`))['3.00']).toBeCloseTo(29.9 * Math.sqrt(2.8), 1)
  })
  it('takes the leak from the row, else the header, else the zero-lift row, at the same pressure', () => {
    const head = `${rest}Test pressure,28 inH2O\n`
    expect(curve(readSheetText(`${head}\nLift mm,cfm,Leak cfm\n1,18.5,0.5\n3,50.5,0.5\n5,70.5,0.5\n`))['3.00']).toBe(50)
    expect(curve(readSheetText(`${head}Leak (valve shut),0.5 cfm\n\nLift mm,cfm\n1,18.5\n3,50.5\n5,70.5\n`))['3.00']).toBe(50)
    const zero = readSheetText(`${head}\nLift mm,cfm\n0,0.5\n1,18.5\n3,50.5\n5,70.5\n`)
    expect(curve(zero)).toEqual({ '1.00': 18, '3.00': 50, '5.00': 70 })
    expect(zero.header.leakCfm28).toBeCloseTo(0.5, 6)
  })
  it('asks about a number with a comma that may part thousands, and does not read it', () => {
    const reading = readSheetText(`${rest.replace('41.0', '41').replace('8.0', '8')}Test pressure;28 inH2O\n\nLift mm;Flow l/min\n1;510\n3;1,416\n5;1,982\n`.replace(/,(?=[A-Z2])/g, ';').replace(/Valve,/, 'Valve;').replace(/Stem,/, 'Stem;').replace('Cylinder,', 'Cylinder;'))
    expect(reading.findings.filter(finding => finding.code === 'ambiguous-number').map(finding => finding.lifts)).toEqual([[3], [5]])
  })
})

describe('faults on other sheets than the school\'s', () => {
  const usual = dunnock().usual_flow
  const sheet = (flows: readonly number[], more = '') => `${rest}Throat,33.6 mm\nTest pressure,28 inH2O\n${more}\nLift mm,Flow cfm\n${usual.lift_mm.map((lift, i) => `${lift},${(flows[i] as number).toFixed(1)}`).join('\n')}\n`
  const faults = (text: string) => codes(readSheetText(text, { casting: dunnock() })).filter(code => !['no-plate', 'air-not-given'].includes(code))

  it('finds nothing wrong with a sound curve', () => {
    expect(faults(sheet(usual.intake.base))).toEqual([])
  })
  it.each([[10], [15], [20]])('asks whether a run said to be at 28 was at %i', (inches) => {
    expect(faults(sheet(usual.intake.base.map(flow => flow * Math.sqrt(inches / 28))))).toContain('wrong-pressure')
  })
  it('refuses a curve brought to 28 twice', () => {
    expect(faults(sheet(usual.intake.base.map(flow => flow * Math.sqrt(2.8))))).toContain('coefficient-over-one')
  })
  it('sees a leak in the curve even where the sheet says there is none', () => {
    expect(faults(sheet(usual.intake.base.map(flow => flow + 4)))).toContain('leak-in-curve')
  })
  it('sees a lift zero that is off', () => {
    const shifted = usual.lift_mm.map((lift, i) => i === 0 ? usual.intake.base[0] as number * (lift - 0.3) / lift : (usual.intake.base[i] as number) - 0.3 * ((usual.intake.base[i] as number) - (usual.intake.base[i - 1] as number)) / 1.27)
    expect(faults(sheet(shifted))).toContain('lift-zero-off')
  })
  it('sees one exchanged figure in the middle and offers it back', () => {
    const reading = readSheetText(sheet(usual.intake.base.map((flow, i) => i === 3 ? 28.9 : flow)), { casting: dunnock() })
    // 82.97 as it should be, written 28.9 for 82.9.
    expect(reading.findings.find(finding => finding.code === 'point-off-curve')?.text).toMatch(/did you mean 82\.9 for 28\.9/)
  })
  it('refuses a lift that cannot be, and a plate out of all reason', () => {
    expect(faults(`${rest}Test pressure,28 inH2O\n\nLift in,Flow cfm\n1,18\n2,34\n3,50\n4,62\n`)).toContain('lift-out-of-bounds')
    expect(faults(sheet(usual.intake.base, 'Plate nominal cfm,150\nPlate today cfm,15\n'))).toContain('plate-out')
    expect(faults(sheet(usual.intake.base, 'Plate nominal cfm,150\nPlate today cfm,147\n'))).toContain('plate-out')
  })
})

describe('anything at all', () => {
  /** A small generator with a seed of its own, so that a failure can be had again. */
  function* numbers(start: number): Generator<number, never> {
    let state = start
    for (;;) {
      state = (state * 1_664_525 + 1_013_904_223) % 4_294_967_296
      yield state / 4_294_967_296
    }
  }
  const hostile = ['', '-', 'NaN', '1e999', '-1', '0', '\u0000', '\uD800', '9'.repeat(500), '1,234', '1.2.3', 'lift', 'Flow cfm', 'Valve 0 mm', '-5 kPa', '=SUM(A1)', '0,0', '1e-300', 'A is 0', 'Full scale', 'Plate', '\u202E28', '0.0001 in', '41.0 mm 8.0 mm', '99/99/9999', 'Infinity cfm', '%']

  it('never throws and never gives a number that is none', () => {
    const random = numbers(20_260_401)
    const texts = Object.values(expectedSheets()).map(({ file }) => decodeSheetBytes(readFileSync(new URL(`../../fixtures/sheets/${file}`, import.meta.url))))
    for (let round = 0; round < 400; round++) {
      const { rows } = splitDelimitedText(texts[round % texts.length] as string)
      for (let changes = 0; changes < 1 + round % 6; changes++) {
        const row = rows[Math.floor(random.next().value * rows.length)] as string[]
        row[Math.floor(random.next().value * row.length)] = hostile[Math.floor(random.next().value * hostile.length)] as string
      }
      const reading = readFlowSheet({ rows }, { casting: dunnock(), profiles, answers: { pressure: hostile[round % hostile.length] as string, valve: hostile[(round * 7) % hostile.length] as string } })
      // JSON writes NaN and the infinities as null: every number that is one comes back as it went.
      const figures = [reading.header.airDensity, reading.header.plateRatio, ...reading.runs.flatMap(run => run.points.flatMap(point => [point.liftMm, point.cfm28, point.expandedUncertainty]))]
      expect(figures.every(figure => Number.isFinite(figure))).toBe(true)
      expect(reading.runs.every(run => run.points.every(point => point.liftMm > 0 && point.cfm28 > 0))).toBe(true)
      expect(reading.findings.every(finding => !/NaN|undefined|Infinity|\bnull\b/.test(finding.text.replace(/"[^"]*"/g, '')))).toBe(true)
    }
  }, 30_000)
  it('is not held up by a long file', () => {
    const long = `${rest}Test pressure,28 inH2O\n\nLift mm,Flow cfm\n${Array.from({ length: 6000 }, (_, i) => `${(i / 100).toFixed(2)},${(20 + i / 50).toFixed(1)}`).join('\n')}\n`
    const start = performance.now()
    const reading = readSheetText(long)
    expect(performance.now() - start).toBeLessThan(3000)
    expect(codes(reading)).toContain('not-a-curve')
  })
})
