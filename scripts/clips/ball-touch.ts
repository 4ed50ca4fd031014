import { between, blue, during, frame, green, height, ink, iron, red, soft, text, type Scene } from './scene'

/*
 * One side of an intake bowl of the Dunnock in section, 18 drawing units a millimetre: land 2.0 mm at 45 degrees, throat 33.6 of a
 * 40.5 seat as received (3.45 mm in) and 36.5 after (2.0 mm in), a ball of 13 mm.
 */
const scale = 18
const x0 = 190
const y0 = 168
const X = (mm: number) => x0 + mm * scale
const Y = (mm: number) => y0 + mm * scale
const landEnd = 1.41

/** The wall from the land down: as received it stands in as a ledge; after, a curve that ends at the land. */
const asReceived = `L${X(landEnd)} ${Y(landEnd)}L${X(2.1)} ${Y(2.6)}L${X(3.45)} ${Y(3.3)}V${Y(6)}C${X(3.4)} ${Y(9)} ${X(2.4)} ${Y(11)} ${X(1.9)} ${Y(13)}L${X(1.5)} ${height + 6}`
const finished = `L${X(landEnd)} ${Y(landEnd)}C${X(1.9)} ${Y(2.4)} ${X(2.05)} ${Y(3.4)} ${X(2)} ${Y(4.6)}C${X(1.9)} ${Y(8)} ${X(1.6)} ${Y(11)} ${X(1.5)} ${Y(13)}L${X(1.2)} ${height + 6}`
const rolledOver = `L${X(0.2)} ${Y(0.2)}C${X(1.5)} ${Y(0.6)} ${X(2.05)} ${Y(2)} ${X(2)} ${Y(4.6)}C${X(1.9)} ${Y(8)} ${X(1.6)} ${Y(11)} ${X(1.5)} ${Y(13)}L${X(1.2)} ${height + 6}`
const dugIn = `L${X(landEnd)} ${Y(landEnd)}L${X(1.45)} ${Y(2)}V${Y(8.2)}A${6.5 * scale} ${6.5 * scale} 0 0 0 ${X(2.35)} ${Y(11.5)}L${X(1.9)} ${Y(13)}L${X(1.5)} ${height + 6}`
const wall = (edge: string) => iron(`M-6 ${Y(0)}H${X(0)}${edge}H-6Z`)
const ghost = `<path d="M${X(0)} ${Y(0)}${asReceived}" fill="none" stroke="${soft}" stroke-width="3" stroke-dasharray="10 8"/>`
const seat = (to = landEnd) => `<path d="M${X(0)} ${Y(0)}L${X(to)} ${Y(to)}" stroke="${blue}" stroke-width="12" stroke-linecap="round"/>`

/** The ball with its shank toward the chamber, and the line round its middle where it is widest. */
function ball(x: number, y: number, second: number, colour: string): string {
  const r = 6.5 * scale
  const teeth = Array.from({ length: 6 }, (_, index) => {
    const at = ((index * 30 + second * 220) % 180) - 90
    const rx = Math.abs(r * Math.sin(at * Math.PI / 180))
    return `<path d="M${x} ${y - r}A${rx.toFixed(1)} ${r} 0 0 ${at < 0 ? 0 : 1} ${x} ${y + r}" fill="none" stroke="${colour}" stroke-width="2" opacity="0.55"/>`
  }).join('')
  return `<path d="M${x} ${y - r + 8}V20" stroke="#5d666f" stroke-width="40"/><circle cx="${x}" cy="${y}" r="${r}" fill="#f3f5f3" stroke="${colour}" stroke-width="4"/>${teeth}<path d="M${x - r} ${y}H${x + r}" stroke="${colour}" stroke-width="3" stroke-dasharray="3 7"/>`
}

const words = (lines: readonly string[], fill: string) => lines.map((line, index) => text(520, 268 + index * 44, line, { fill: index === 0 ? fill : ink, weight: index === 0 ? 650 : 500 })).join('')

function draw(second: number): string {
  const right = X(2) + 6.5 * scale
  if (second < 4.2) return wall(asReceived) + seat() + during(second, 0.6, 4.2, `<path d="M${X(8.6)} ${Y(4.6)}H${X(3.7)}" stroke="${red}" stroke-width="3"/>${text(X(8.9), Y(4.6) + 10, 'a ledge: 33.6 mm where the valve is 41', { fill: red, weight: 600, size: 29 })}${text(X(5), Y(0) - 14, 'seat land', { fill: blue, weight: 650, size: 29 })}<path d="M${X(4.8)} ${Y(0) - 18}L${X(1.2)} ${Y(0.8)}" stroke="${blue}" stroke-width="2.5"/>`)
  if (second < 9.4) {
    const cut = between(second, 5, 7.6)
    // The ball comes against the ledge and takes it back to the curve.
    const x = right + 6 * scale * (1 - between(second, 4.2, 5)) + 1.5 * scale * (1 - cut)
    return wall(second < 7.2 && cut < 0.95 ? asReceived : finished) + ball(x, Y(4.6), second, green) + (cut >= 0.95 ? ghost : '') + seat() + during(second, 5, 9.4, words(['Right: the widest part cuts,', 'just below the land.', 'The curve ends at the seat.'], green))
  }
  if (second < 13.2) {
    const climb = between(second, 10.4, 10.9)
    return wall(climb > 0.6 ? rolledOver : finished) + ball(right - climb * 2.2 * scale, Y(4.6) - climb * 6.6 * scale, second, red) + (climb > 0.6 ? '' : seat()) + during(second, 10.6, 13.2, words(['Too high: it climbs out', 'and takes the corner', 'off the land.'], red))
  }
  if (second < 17) {
    const dug = between(second, 13.8, 15)
    return wall(dug > 0.5 ? dugIn : finished) + ball(right - dug * 0.55 * scale, Y(4.6) + dug * 3.6 * scale, second, red) + seat() + during(second, 14.2, 17, words(['Too low: a straight wall', 'with a corner beneath.', 'It looks clean from above.'], red))
  }
  return order(second)
}

/** Round the clock: from the long side, and the short-turn side last. */
function order(second: number): string {
  const x = 290
  const y = 305
  const arc = (from: number, to: number, share: number) => {
    const at = (clock: number) => [x + 150 * Math.sin(clock * Math.PI / 6), y - 150 * Math.cos(clock * Math.PI / 6)] as const
    const end = from + (to - from) * share
    const [ax, ay] = at(from)
    const [bx, by] = at(end)
    return share <= 0 ? '' : `<path d="M${ax} ${ay}A150 150 0 0 ${to < from ? 0 : 1} ${bx.toFixed(1)} ${by.toFixed(1)}" fill="none" stroke="${green}" stroke-width="22"/>`
  }
  return [
    `<circle cx="${x}" cy="${y}" r="150" fill="none" stroke="#d3d8d5" stroke-width="26"/>`,
    arc(6, 2, between(second, 17.4, 18.6)), arc(6, 10, between(second, 17.4, 18.6)),
    second > 18.8 ? `<path d="M${x - 130} ${y - 75}A150 150 0 0 1 ${x + 130} ${y - 75}" fill="none" stroke="${red}" stroke-width="22" stroke-dasharray="12 9"/>` : '',
    ...(['12', '3', '6', '9'] as const).map((name, index) => text(x + 195 * Math.sin(index * Math.PI / 2), y - 195 * Math.cos(index * Math.PI / 2) + 11, name, { anchor: 'middle', weight: 650 })),
    text(570, 240, 'Begin at 6, the long side.', { weight: 650 }), text(570, 286, 'Work toward 3 and 9.'),
    second > 18.6 ? text(570, 346, '12 last, and the least there.', { fill: red, weight: 650 }) : '',
  ].join('')
}

export const ballTouch: Scene = { name: 'ball-touch', seconds: 20.5, draw: second => frame('Where the ball must touch', draw(second)) }
