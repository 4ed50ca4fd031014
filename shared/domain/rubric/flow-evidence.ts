import type { FlowPoint, FlowRun, SheetHeader } from '../airflow/flow-run'
import { flowUncertainty } from '../airflow/flow-uncertainty'
import type { ValveOnSeat } from '../airflow/smallest-opening'
import type { Side } from '../units/port'
import type { EvidenceSet, JudgedUnit, SheetEvidence } from './evidence'

/** Op whose sheets are the baseline every change is held against (handbook 2.3). */
export const baselineOp = 30

/** A run with the sheet it came from. */
export interface SheetRun { sheet: SheetEvidence, run: FlowRun }

/** Runs of a port at an op, newest sheet first, in the order of the sheet within one. A run whose sheet names no side is of neither. */
export function runsOf(evidence: EvidenceSet, op: number, unit: JudgedUnit): SheetRun[] {
  return evidence.sheets.filter(sheet => sheet.op === op)
    .sort((a, b) => b.takenAt - a.takenAt || (a.id < b.id ? 1 : -1))
    .flatMap(sheet => sheet.runs.map(run => ({ sheet, run })))
    .filter(({ run }) => run.points.length > 0 && run.side !== null && (unit.side === null || run.side === unit.side)
      && (unit.cylinder === null || run.cylinder === null || run.cylinder === unit.cylinder))
}

/**
 * The run of a port that counts at an op: that of its newest sheet; where that sheet ran the port several times, their mean at each lift.
 *
 * Null when there is none.
 */
export function runOf(evidence: EvidenceSet, op: number, unit: JudgedUnit): SheetRun | null {
  const all = runsOf(evidence, op, unit)
  const [newest] = all
  if (!newest) return null
  const same = all.filter(one => one.sheet === newest.sheet && one.run.side === newest.run.side && one.run.cylinder === newest.run.cylinder)
  return same.length === 1 ? newest : { sheet: newest.sheet, run: meanRun(same.map(one => one.run)) }
}

/** The baseline of the same cylinder and side, newest. */
export function baselineOf(evidence: EvidenceSet, unit: JudgedUnit): SheetRun | null {
  return runOf(evidence, baselineOp, unit)
}

function meanRun(runs: readonly FlowRun[]): FlowRun {
  const [first] = runs as [FlowRun]
  const points = first.points.map((point): FlowPoint => {
    const same = runs.flatMap(run => run.points.filter(one => Math.abs(one.liftMm - point.liftMm) <= 0.02))
    const cfm28 = same.reduce((sum, one) => sum + one.cfm28, 0) / same.length
    return { ...point, cfm28, expandedUncertainty: flowUncertainty(cfm28, 'change') }
  })
  return { ...first, points }
}

/**
 * One side of the head is judged at the cylinder that was run both now and as a baseline; else at the one run now; else at the
 * baseline's. Null where no sheet says.
 */
export function cylinderRun(evidence: EvidenceSet, side: Side): number | null {
  const cylinders = (op: number) => runsOf(evidence, op, { cylinder: null, side }).map(one => one.run.cylinder).filter((one): one is number => one !== null)
  const [now, base] = [cylinders(evidence.op), cylinders(baselineOp)]
  return now.find(cylinder => base.includes(cylinder)) ?? now[0] ?? base[0] ?? null
}

/** Valve head diameter as the sheet gives it, else the card's. */
export function valveHeadMm(evidence: EvidenceSet, header: SheetHeader, side: Side): number {
  return header.valveMm ?? evidence.casting.valves[side].head
}

/**
 * The valve on its seat for the smallest opening: the card's seat and stem, the land and throat the sheet gives. Without a land on the
 * sheet the middle of what the card says is left after bowl work stands in; it moves the coefficient by a few per cent at most.
 */
export function valveOnSeat(evidence: EvidenceSet, header: SheetHeader, side: Side): ValveOnSeat {
  const card = evidence.casting.valves[side]
  const seatDeg = header.seatDeg ?? card.seat_deg
  return {
    seatOuterMm: Math.min(card.seat_od, valveHeadMm(evidence, header, side)),
    stemMm: header.stemMm ?? card.stem,
    seatWidthMm: (header.landMm ?? 1.65) * Math.cos(seatDeg * Math.PI / 180),
    seatDeg,
    throatMm: header.throatMm,
  }
}

/** Stage of the casting's usual curves by op: received until the bowl, and so on. */
export function usualStage(op: number): 'base' | 'bowl' | 'port' | 'short' {
  return op < 100 ? 'base' : op < 130 ? 'bowl' : op < 150 ? 'port' : 'short'
}
