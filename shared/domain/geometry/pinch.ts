import type { TraceStep } from '../uncertainty/evaluated'
import { assertSections, type Section } from './assert-sections'

/** Where a port is narrowest. */
export interface Pinch {
  stationMm: number
  areaMm2: number
  /** u of each, from the doubt of the three sections. */
  stationUncertainty: number
  areaUncertainty: number
  /** False where the least section has no narrower neighbourhood to fit (it is the first or last): then it is the section itself. */
  fitted: boolean
  trace: TraceStep[]
}

/** One standard uncertainty of a traced section, as a share of it. Source: handbook 8.1 (2 % at k = 2). */
const sectionShare = 0.01

/**
 * The pinch: the vertex of the parabola through the least section and its two neighbours.
 *
 * A = a s² + b s + c, s* = -b/2a, A* = c - b²/4a. Its doubt is carried through by the slope of s* and A* against each of the three
 * areas, which are taken as independent. Give the sections of the port without its bowl.
 *
 * Units: mm, mm2.
 * Source: handbook 8.1.
 *
 * @throws {RangeError} with fewer than three sections, stations that do not rise, or an area or share not above zero
 * @example
 * pinch([{ stationMm: 15, areaMm2: 905 }, { stationMm: 30, areaMm2: 790 }, { stationMm: 45, areaMm2: 880 }]) // => 30.9 mm, 790 mm2
 */
export function pinch(sections: readonly Section[], share = sectionShare): Pinch {
  assertSections('pinch', sections, 3)
  if (!(share > 0) || !Number.isFinite(share)) throw new RangeError('pinch requires a share above zero')
  const least = sections.reduce((best, section, index) => section.areaMm2 < (sections[best] as Section).areaMm2 ? index : best, 0)
  const three = sections.slice(Math.max(0, least - 1), least + 2)
  const lowest = sections[least] as Section
  const areas = three.map(section => section.areaMm2)
  const vertex = three.length === 3 ? vertexOf(three, areas) : null
  if (vertex === null) {
    return {
      ...lowest, stationUncertainty: 0, areaUncertainty: share * lowest.areaMm2, fitted: false,
      trace: [{ what: 'least section, at the end of the port', sum: sections.map(section => section.areaMm2.toFixed(0)).join(', '), gives: `${lowest.areaMm2.toFixed(0)} mm2 at ${lowest.stationMm} mm` }],
    }
  }
  const moved = areas.map((area, index) => {
    const step = share * area
    // Half a step each way; a vertex this near the least section does not vanish under one per cent.
    const up = vertexOf(three, areas.map((value, other) => other === index ? value + step / 2 : value)) ?? vertex
    const down = vertexOf(three, areas.map((value, other) => other === index ? value - step / 2 : value)) ?? vertex
    return { station: up.stationMm - down.stationMm, area: up.areaMm2 - down.areaMm2 }
  })
  return {
    ...vertex,
    stationUncertainty: Math.hypot(...moved.map(one => one.station)),
    areaUncertainty: Math.hypot(...moved.map(one => one.area)),
    fitted: true,
    trace: [
      { what: 'least section and its neighbours', sum: three.map(section => `${section.areaMm2.toFixed(0)} mm2 at ${section.stationMm}`).join(', '), gives: 'three points of a parabola' },
      { what: 'vertex of the parabola', sum: `A = ${vertex.a.toFixed(4)} s^2 + ${vertex.b.toFixed(3)} s + ${vertex.c.toFixed(1)}; s = -b / 2a`, gives: `${vertex.areaMm2.toFixed(0)} mm2 at ${vertex.stationMm.toFixed(1)} mm` },
    ],
  }
}

interface Vertex { stationMm: number, areaMm2: number, a: number, b: number, c: number }

/** Null where the three do not open to both sides. */
function vertexOf(three: readonly Section[], areas: readonly number[]): Vertex | null {
  const [s0, s1, s2] = three.map(section => section.stationMm) as [number, number, number]
  const [a0, a1, a2] = areas as [number, number, number]
  const first = (a1 - a0) / (s1 - s0)
  const second = (a2 - a1) / (s2 - s1)
  const a = (second - first) / (s2 - s0)
  if (!(a > 0)) return null
  const b = first - a * (s0 + s1)
  const c = a0 - a * s0 * s0 - b * s0
  const stationMm = -b / (2 * a)
  if (stationMm < s0 || stationMm > s2) return null
  return { stationMm, areaMm2: c - b * b / (4 * a), a, b, c }
}
