/** What a unit is doing at a minute of the day, in words and as a sign; colour never says it alone. */
import { type ClockChange, clockWords } from '#lib/strip/clock.ts'
import { CHARGE_EVERY_MIN, type HouseCell } from './types.ts'

export type Sign = 'hazard' | 'short' | 'running' | 'ready' | 'waits' | 'rests' | 'nothing'

export interface CellState {
  /** The most pressing thing about the unit. */
  readonly sign: Sign
  readonly running: boolean
  readonly words: string
  /** Whole percent; `null` in large houses and without a tank on record. */
  readonly chargePercent: number | null
}

export function cellState(cell: HouseCell, minute: number, change: ClockChange | null): CellState {
  const running = cell.runs.some((run) => run.startMin <= minute && minute < run.endMin)
  const chargePercent = cell.charge[Math.min(cell.charge.length - 1, Math.floor(minute / CHARGE_EVERY_MIN))] ?? null
  return { running, chargePercent, ...said(cell, { minute, running, change }) }
}

interface Moment {
  readonly minute: number
  readonly running: boolean
  readonly change: ClockChange | null
}

function said(cell: HouseCell, { minute, running, change }: Moment): Pick<CellState, 'sign' | 'words'> {
  if (cell.hazard) return { sign: 'hazard', words: cell.hazard }
  const shortfallMin = Math.max(0, ...cell.needs.map((need) => need.shortfallMin))
  if (shortfallMin > 0) return { sign: 'short', words: `${Math.ceil(shortfallMin)} min short` }
  if (cell.needs.some((need) => need.readyAtMin === null)) return { sign: 'short', words: 'cannot make it' }
  if (cell.nothing) return { sign: running ? 'running' : 'nothing', words: running ? 'running' : cell.nothing }
  const next = cell.needs.find((need) => minute < need.endMin)
  if (next && minute >= next.readyByMin) return { sign: 'ready', words: 'showering' }
  if (next && next.readyAtMin !== null && minute >= next.readyAtMin) return { sign: 'ready', words: running ? 'ready, running' : 'ready' }
  if (running) return { sign: 'running', words: 'running' }
  if (next) return { sign: 'waits', words: `ready by ${clockWords(next.readyByMin, change)}` }
  return { sign: 'rests', words: cell.needs.length > 0 ? 'done' : 'no need' }
}
