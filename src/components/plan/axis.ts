/** The hours of one planned day from left to right: where an instant stands, and which slots are shown. Pure. */
import type { PlanDay, PlanDraft } from '#lib/plan/draft-plan.server.ts'
import { type MovableRun, slotAt, slotFrom } from '#lib/plan/types.ts'

export interface Axis {
  readonly fromMs: number
  readonly toMs: number
  readonly fromSlot: number
  readonly toSlot: number
  /** 0 to 100, cut to the axis. */
  readonly percent: (instantMs: number) => number
}

const HOUR_MS = 3_600_000
/** Less than this would draw minutes as hours. */
const LEAST_HOURS = 8

/** From the first sensible start of the day's runs to the last end, in whole hours. */
export function axisOf(draft: Pick<PlanDraft, 'grid'>, day: PlanDay, runs: readonly MovableRun[]): Axis {
  let from = runs.length > 0 ? Infinity : day.startsAtMs
  let to = runs.length > 0 ? -Infinity : day.startsAtMs + day.dayMin * 60_000
  for (const run of runs) {
    from = Math.min(from, run.earliestMs, run.todayMs)
    to = Math.max(to, run.latestMs + run.longestMin * 60_000, run.readyByAtMs + HOUR_MS)
  }
  const hour = (instantMs: number) => (instantMs - day.startsAtMs) / HOUR_MS
  const fromMs = day.startsAtMs + Math.floor(hour(from)) * HOUR_MS
  const toMs = Math.max(day.startsAtMs + Math.ceil(hour(to)) * HOUR_MS, fromMs + LEAST_HOURS * HOUR_MS)
  return {
    fromMs,
    toMs,
    fromSlot: Math.max(0, slotAt(draft.grid, fromMs)),
    toSlot: Math.min(draft.grid.slots, slotFrom(draft.grid, toMs)),
    percent: (instantMs) => Math.min(100, Math.max(0, ((instantMs - fromMs) / (toMs - fromMs)) * 100)),
  }
}

/** Whole hours to label: every one, or every second, third or sixth where they would touch. */
export function hoursOf({ fromMs, toMs }: Axis): readonly number[] {
  const count = Math.round((toMs - fromMs) / HOUR_MS)
  const step = count <= 10 ? 1 : count <= 20 ? 2 : count <= 30 ? 3 : 6
  return Array.from({ length: Math.floor(count / step) + 1 }, (_, index) => fromMs + index * step * HOUR_MS)
}
