import { between, blue, during, frame, green, height, ink, iron, red, soft, text, width, type Scene } from './scene'

/*
 * A section through an intake seat of the Dunnock, 8.5 drawing units a millimetre: seat 40.5 outside, 2.0 mm of land at 45 degrees,
 * valve head 41.0 with a margin of 1.3 (drawn as much larger as it must be to be seen), floor level with the seat's outer edge.
 */
const middle = 480
const floor = 250
const seatOut = 172
const seatIn = 148
const throat = 138
const land = seatOut - seatIn
/** Drawn twice its true height: 1.3 mm would be a line. */
const margin = 34

const block = (side: 1 | -1) => {
  const x = (from: number) => middle + side * from
  return `M${x(seatOut)} ${floor}L${x(seatIn)} ${floor + land}L${x(throat)} ${floor + 62}C${x(throat - 2)} ${floor + 120} ${x(throat + 60)} ${floor + 150} ${x(throat + 66)} ${height + 6}H${x(430)}V${floor}Z`
}

/** The valve with its stem; `kept` is what is left of its margin, 1 to 0; `lift` how far it stands off its seat. */
function valve(kept: number, lift: number): string {
  const top = floor - margin * kept - lift
  const edge = floor - lift
  const side = (sign: 1 | -1) => `${middle + sign * seatOut} ${edge}L${middle + sign * seatIn} ${edge + land}C${middle + sign * 90} ${edge + 56} ${middle + sign * 26} ${edge + 70} ${middle + sign * 26} ${height + 6}`
  return `<path d="M${middle - seatOut} ${top}H${middle + seatOut}L${side(1)}H${middle - 26}C${middle - 26} ${edge + 70} ${middle - 90} ${edge + 56} ${middle - seatIn} ${edge + land}L${middle - seatOut} ${edge}Z" fill="#c9d4ee" stroke="${blue}" stroke-width="3" stroke-linejoin="round"/>`
}

/** A cutting disc on edge, crossing the floor from one side. */
const disc = (x: number, y: number, colour: string) => `<rect x="${x - 62}" y="${y - 17}" width="124" height="17" rx="4" fill="#fff" stroke="${colour}" stroke-width="3.5"/><path d="M${x} ${y - 17}V${y - 66}" stroke="${colour}" stroke-width="9"/>`

const callout = (x: number, y: number, toX: number, toY: number, words: string, fill: string) => `<path d="M${x} ${y + 8}L${toX} ${toY}" stroke="${fill}" stroke-width="2.5"/>${text(x, y, words, { fill, anchor: 'middle', size: 30, weight: 600 })}`

function section(second: number): string {
  const kept = 1 - between(second, 5, 7.2)
  const lift = 74 * between(second, 4.2, 5) * (1 - between(second, 7.6, 8.6))
  const stuck = Math.min(1, Math.max(0, (second - 1.4) / 1.4))
  const swept = between(second, 9.2, 11.4)
  return [
    iron(block(-1)), iron(block(1)), valve(kept, lift),
    during(second, 0.1, 2.2, callout(770, 130, middle + seatOut - 2, floor + 6, 'the seat', blue) + text(60, floor - 96, 'chamber floor', { fill: soft, size: 28 })),
    during(second, 0.4, 4.2, disc(130 + 100 * stuck, floor, second > 2.8 ? red : soft)),
    during(second, 2.2, 4.3, callout(250, 130, middle - seatOut + 4, floor - margin + 4, 'the margin is in the way', red)),
    during(second, 5, 8.8, callout(770, 120, middle + seatOut - 6, floor - lift - 4, 'margin ground away', blue)),
    during(second, 9, 12, disc(130 + 700 * swept, floor, green)),
    during(second, 9.4, 12, text(middle, 136, 'level: one sweep, floor and valve', { fill: green, anchor: 'middle', weight: 600 })),
  ].join('')
}

/** Depth across the edge at four spots, then what the ring light shows. */
function fromAbove(second: number): string {
  const x = 300
  const y = 300
  const turned = -100 * (1 - between(second, 15.4, 17))
  // The sliver of seat shows until the dummy is turned to where it covers.
  const sliver = 11 * (1 - between(second, 15.4, 17))
  const spots = [[0, -1], [1, 0], [0, 1], [-1, 0]] as const
  const names = ['12', '3', '6', '9']
  return [
    `<rect x="0" y="56" width="${width}" height="${height - 56}" fill="#e9edea"/>`,
    `<circle cx="${x}" cy="${y}" r="172" fill="#f6d469" stroke="${ink}" stroke-width="3"/>`,
    `<circle cx="${x + sliver}" cy="${y + sliver * 0.4}" r="171" fill="#c9d4ee" stroke="${blue}" stroke-width="3"/>`,
    `<g transform="rotate(${turned.toFixed(1)} ${x} ${y})"><path d="M${x} ${y - 150}v34" stroke="${soft}" stroke-width="3"/></g>`,
    during(second, 17.2, 19, `<path d="M${x} ${y - 176}v44" stroke="${ink}" stroke-width="10"/>`),
    ...spots.map(([dx, dy], index) => text(x + dx * 206, y + dy * 206 + 11, names[index] ?? '', { anchor: 'middle', size: 30, weight: 650 })),
    during(second, 12, 15, spots.map(([dx, dy], index) => second > 12.3 + index * 0.5 ? `<circle cx="${x + dx * 150}" cy="${y + dy * 150}" r="15" fill="${green}"/>` : '').join('')),
    during(second, 12.2, 15, text(560, 220, 'Depth at four spots,', { weight: 650 }) + text(560, 262, 'from the chamber floor:') + text(560, 322, '0.30 mm below', { fill: green, weight: 650 }) + text(560, 364, 'to 0.05 mm above', { fill: green, weight: 650 })),
    during(second, 15, 19, text(560, 220, 'Ring light, straight down:', { weight: 650 }) + (second < 17 ? text(560, 272, 'a bright sliver of seat.', { fill: red, weight: 600 }) + text(560, 322, 'Turn it until it covers.') : text(560, 272, 'no bright ring.', { fill: green, weight: 650 }) + text(560, 322, 'Pen the lip at 12.'))),
  ].join('')
}

export const dummyValves: Scene = {
  name: 'dummy-valves',
  seconds: 18.5,
  draw: second => frame('Dummy valves protect the seat', second < 12 ? section(second) : fromAbove(second)),
}
