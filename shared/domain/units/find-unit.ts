import { type UnitDefinition, type UnitName, unitTable } from './unit-table'

/**
 * The definition of a unit by its exact name ("mm", "inH2O", "l/s").
 *
 * @throws {RangeError} when the name is not in the table
 */
export function findUnit(name: string): UnitDefinition {
  if (!Object.hasOwn(unitTable, name)) throw new RangeError(`unknown unit "${name}"`)
  return unitTable[name as UnitName]
}
