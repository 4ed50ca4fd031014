/** A unit as it is written: mm2 is mm². */
export function writtenUnit(unit: string): string {
  if (unit === '1' || unit === '-' || unit === 'count') return ''
  return unit.replace(/ @28$/, '').replace(/([a-z])([23])(?=$|\/)/g, (_, letter: string, power: string) => `${letter}${power === '2' ? '²' : '³'}`).replace('inH2O', 'inH₂O').replace('deg', '°').trim()
}
