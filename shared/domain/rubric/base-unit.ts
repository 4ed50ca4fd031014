/** Unit a criterion's values are in, by the unit its band is written in: "mm proud" is mm, "kPa drop / 10 min" is kPa. */
export function baseUnit(unit: string): string {
  if (unit === 'yes/no' || unit === 'count' || unit === 'points' || unit === 'stations') return unit
  const [first = unit] = unit.split(' ')
  return first === 'ratio' ? '1' : first
}
