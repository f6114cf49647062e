/** Where a unit stands in the elevation: floor and stack from the roster; without them, reading order. */

export interface Placed {
  readonly code: string
  readonly floor: number | null
  readonly stack: string | null
}
export interface Floor<T> {
  /** `null`: the roster knows no floors. */
  readonly floor: number | null
  /** One entry a column, left to right; `null` is a gap. */
  readonly columns: readonly (T | null)[]
}

const byCode = (one: Placed, other: Placed) => one.code.localeCompare(other.code, 'en', { numeric: true })

/** Top floor first. All floors have the same number of columns. */
export function placeUnits<T extends Placed>(units: readonly T[]): readonly Floor<T>[] {
  if (units.length === 0) return []
  if (units.some((unit) => unit.floor === null)) return inReadingOrder(units)
  const stacks = [...new Set(units.map((unit) => unit.stack ?? ''))].sort((one, other) => one.localeCompare(other, 'en', { numeric: true }))
  const floors = [...new Set(units.map((unit) => unit.floor ?? 0))].sort((one, other) => other - one)
  const rows = floors.map((floor) => ({ floor, units: units.filter((unit) => unit.floor === floor).sort(byCode) }))
  // Two units of one floor and stack, or none with a stack, cannot stand in columns: then a floor is filled from the left.
  const inStacks = stacks.length > 1 && rows.every((row) => new Set(row.units.map((unit) => unit.stack)).size === row.units.length)
  const width = inStacks ? stacks.length : Math.max(...rows.map((row) => row.units.length))
  return rows.map((row) => ({
    floor: row.floor,
    columns: Array.from({ length: width }, (_, column) =>
      inStacks ? (row.units.find((unit) => (unit.stack ?? '') === stacks[column]) ?? null) : (row.units[column] ?? null),
    ),
  }))
}

const WIDEST = 12

function inReadingOrder<T extends Placed>(units: readonly T[]): readonly Floor<T>[] {
  const sorted = [...units].sort(byCode)
  const width = Math.min(WIDEST, Math.max(2, Math.ceil(Math.sqrt(units.length * 0.7))))
  return Array.from({ length: Math.ceil(sorted.length / width) }, (_, row) => ({
    floor: null,
    columns: Array.from({ length: width }, (_, column) => sorted[row * width + column] ?? null),
  }))
}
