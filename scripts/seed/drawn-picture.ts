/** Strokes of the seven-bar figures: a font may be missing on a bare machine, and a stamp is bars anyway. */
const bars: Readonly<Record<string, string>> = { 0: 'abcdef', 1: 'bc', 2: 'abged', 3: 'abgcd', 4: 'fgbc', 5: 'afgcd', 6: 'afgedc', 7: 'abc', 8: 'abcdefg', 9: 'abcdfg' }
const ends: Readonly<Record<string, [number, number, number, number]>> = {
  a: [0, 0, 1, 0], b: [1, 0, 1, 1], c: [1, 1, 1, 2], d: [0, 2, 1, 2], e: [0, 1, 0, 2], f: [0, 0, 0, 1], g: [0, 1, 1, 1],
}

function figures(text: string, x: number, y: number, size: number): string {
  return [...text].filter(letter => letter in bars).map((letter, index) => [...bars[letter] ?? ''].map((bar) => {
    const [x1, y1, x2, y2] = ends[bar] ?? [0, 0, 0, 0]
    const at = x + index * size * 1.6
    return `<path d="M${at + x1 * size} ${y + y1 * size}L${at + x2 * size} ${y + y2 * size}"/>`
  }).join('')).join('')
}

const ground = '<rect width="960" height="720" fill="#8d9296"/><rect y="560" width="960" height="160" fill="#777c80"/>'

/**
 * A plain drawing for the views no rendered picture shows: a stamp, a gauge, a slice on its grid, a face, a bench. It proves nothing and
 * pretends nothing; it is there so that every screen has a picture of the right kind to show.
 *
 * @param number head's number, whose figures are drawn as its stamp; empty for none
 */
export function drawnPicture(view: string, number: string): string {
  const stamp = `<g stroke="#2b2e31" stroke-width="9" stroke-linecap="round" fill="none">${figures(number.replace(/\D/g, ''), 360, 600, 34)}</g>`
  const inside: Readonly<Record<string, string>> = {
    'view-6': window('#5d6266', 330, 180, 300, 250), 'view-7': window('#3a3d40', 350, 200, 260, 226), 'view-8': bend,
    'view-9': slice, 'view-10': dial(20), 'view-11': `${dial(-35)}<rect x="640" y="300" width="120" height="60" fill="#c9ccce"/>`,
    'view-13': person, 'view-14': bench, 'view-15': '<rect x="250" y="120" width="460" height="320" fill="#f1efe8" stroke="#333" stroke-width="3"/><path d="M290 190h380M290 250h380M290 310h380M290 370h240" stroke="#999" stroke-width="3"/>',
  }
  return `<svg xmlns="http://www.w3.org/2000/svg" width="960" height="720">${ground}${inside[view] ?? dial(0)}${stamp}</svg>`
}

const window = (fill: string, x: number, y: number, w: number, h: number) => `<rect x="${x - 90}" y="${y - 70}" width="${w + 180}" height="${h + 140}" fill="#a9aeb2"/><rect x="${x}" y="${y}" width="${w}" height="${h}" rx="60" fill="${fill}"/><rect x="${x - 6}" y="${y - 6}" width="${w + 12}" height="${h + 12}" rx="64" fill="none" stroke="#dfe3e6" stroke-width="2"/>`
const dial = (deg: number) => `<circle cx="480" cy="300" r="210" fill="#f4f4f0" stroke="#333" stroke-width="8"/>${Array.from({ length: 40 }, (_, index) => `<path d="M480 106v${index % 5 === 0 ? 30 : 16}" stroke="#333" stroke-width="3" transform="rotate(${index * 9} 480 300)"/>`).join('')}<path d="M480 320V130" stroke="#b3261e" stroke-width="6" transform="rotate(${deg} 480 300)"/><circle cx="480" cy="300" r="12" fill="#333"/>`
const slice = `<rect x="180" y="60" width="600" height="460" fill="#fbfaf4"/>${Array.from({ length: 31 }, (_, index) => `<path d="M${180 + index * 20} 60V520" stroke="#c8d2da"/>`).join('')}${Array.from({ length: 24 }, (_, index) => `<path d="M180 ${60 + index * 20}H780" stroke="#c8d2da"/>`).join('')}<rect x="310" y="150" width="340" height="280" rx="90" fill="#c46a4a" stroke="#5c2e20" stroke-width="3"/>`
const bend = '<path d="M180 470C400 470 470 420 500 320S520 120 700 110" stroke="#3d4144" stroke-width="120" fill="none"/><path d="M180 530C440 530 540 470 580 330" stroke="#d9dde0" stroke-width="6" fill="none"/>'
const person = '<circle cx="480" cy="200" r="90" fill="#d6b89c"/><rect x="400" y="180" width="160" height="50" rx="24" fill="#cfe6f5" stroke="#222" stroke-width="6"/><path d="M385 150a100 100 0 0 1 190 0" stroke="#c22" stroke-width="24" fill="none"/><path d="M300 560c20-190 340-190 360 0z" fill="#2c3f70"/>'
const bench = '<rect x="140" y="330" width="680" height="180" fill="#56606a"/><rect x="330" y="210" width="300" height="120" fill="#9aa0a5"/><circle cx="250" cy="250" r="70" fill="#f4f4f0" stroke="#333" stroke-width="6"/><path d="M250 255l30-44" stroke="#b3261e" stroke-width="5"/><path d="M700 200v130" stroke="#7fb2d6" stroke-width="22"/>'
