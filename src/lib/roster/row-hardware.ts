/** What the reading of a row's hardware passes on: the cells, what is recorded, and the defaults that had to stand in. */
import type { Installation } from '#lib/core/hardware/types.ts'
import type { CellReader } from './cells.ts'
import type { HardwareCells } from './hardware-cells.ts'

export interface HardwareContext {
  readonly supplyVoltageV: number
  /** What is on record; `null` for a unit without any. */
  readonly before: Installation | null
  /** Names of the defaults used are put here. */
  readonly defaults: string[]
}

export interface RowHardware extends HardwareContext {
  readonly cell: CellReader
  /** What is on record as cells; empty where nothing is. */
  readonly recorded: HardwareCells
}

/** Notes a default by its name. */
export const named = <T>(defaults: string[], what: string, value: T): T => {
  defaults.push(what)
  return value
}
