/** Nearest ready-by times of the same day that would work with today's hardware, nearest first. */
import { MIN_PER_DAY } from '../units.ts'
import { type Cycle, cycleOf, needEndMin, run, servedByNeed, servesAll } from './cycle.ts'
import { runsOf } from './required-run.ts'
import type { TankState } from './simulate.ts'
import type { ShowerNeed, UnitDay } from './types.ts'

const STEP_MIN = 15
const REACH_MIN = 180
const SUGGESTIONS = 3

interface NextBest {
  readonly day: UnitDay
  readonly cycle: Cycle
  /** State at the cycle's start. */
  readonly state: TankState
  readonly need: ShowerNeed
  /** Where in the need the run is best ended, as its required run has it. */
  readonly endFraction: number
}

export function nextBestReadyBy({ day, cycle, state, need, endFraction }: NextBest): readonly number[] {
  // With one need a pressed timer can be pressed as long before it at every hour: only a clock or another need tells hours apart.
  if (day.runs.kind === 'pressed' && day.needs.length === 1) return []
  const found: number[] = []
  for (let away = STEP_MIN; away <= REACH_MIN && found.length < SUGGESTIONS; away += STEP_MIN) {
    for (const readyByMin of [need.readyByMin + away, need.readyByMin - away]) {
      if (found.length >= SUGGESTIONS) break
      const moved = cycleWith({ day, cycle, need, readyByMin })
      if (!moved) continue
      const on =
        day.runs.kind === 'clocked' ? day.runs.onIntervals : runsOf(moved.cycle, { durationMin: day.runs.guaranteedMin, endFraction })
      const served = servedByNeed(moved.cycle, run(moved.cycle, state, on))[moved.index] ?? 0
      if (servesAll(need, served)) found.push(readyByMin)
    }
  }
  return found
}

interface Moved {
  readonly day: UnitDay
  readonly cycle: Cycle
  readonly need: ShowerNeed
  readonly readyByMin: number
}

/** The day with a need moved; `null` when it would leave the day or meet another need. */
function cycleWith({ day, cycle, need, readyByMin }: Moved): { readonly cycle: Cycle; readonly index: number } | null {
  const moved: ShowerNeed = { ...need, readyByMin }
  const others = day.needs.filter((other) => other !== need)
  if (readyByMin < Math.max(0, cycle.startMin) || needEndMin(moved) > MIN_PER_DAY) return null
  if (others.some((other) => other.readyByMin < needEndMin(moved) && readyByMin < needEndMin(other))) return null
  const changed = cycleOf({ ...day, needs: [...others, moved] }, cycle.startMin + MIN_PER_DAY)
  return { cycle: changed, index: changed.needs.indexOf(moved) }
}
