/**
 * Start-by for runs that a person starts: the latest start from which the settled tank serves a need with the run that can be
 * counted on. Served minutes are taken on their monotone envelope: whoever starts earlier never gets fewer (the tank
 * stays on offer until the need), so the search may bisect.
 */
import type { MinuteInterval } from '../time/types.ts'
import { type Cycle, drawsOf, earliestMin, minutesWanted, needEndMin } from './cycle.ts'
import { simulate, type TankState } from './simulate.ts'
import type { ShowerNeed } from './types.ts'

export interface StartChoice {
  readonly startMin: number
  readonly servedMin: number
  readonly serves: boolean
}

interface Before {
  readonly cycle: Cycle
  readonly index: number
  /** State at `earliestMin(cycle, index)`. */
  readonly state: TankState
  readonly durationMin: number
  /** Runs pressed before that may still be on: yesterday's last, or the one for the need before. */
  readonly earlier: readonly MinuteInterval[]
}

export function latestStart({ cycle, index, state, durationMin, earlier }: Before): StartChoice {
  const need = cycle.needs[index] as ShowerNeed
  const from = earliestMin(cycle, index)
  const served = (startMin: number): number => {
    const on: readonly MinuteInterval[] = [...earlier, { startMin, endMin: startMin + durationMin }]
    const simulation = simulate(cycle.tank, state, { startMin: from, endMin: needEndMin(need), on, draws: drawsOf(need) })
    return simulation.servedMin.reduce((sum, minutes) => sum + minutes, 0)
  }
  const wanted = minutesWanted(need) - 1e-6
  const latest = need.readyByMin
  const complete = Math.max(from, need.readyByMin - durationMin)
  const servedAtLatest = served(latest)
  if (servedAtLatest >= wanted) return { startMin: latest, servedMin: servedAtLatest, serves: true }
  const servedComplete = served(complete)
  if (servedComplete < wanted) return { startMin: complete, servedMin: servedComplete, serves: false }
  let early = Math.floor(complete)
  let late = latest
  while (late - early > 1) {
    const middle = Math.floor((early + late) / 2)
    if (served(middle) >= wanted) early = middle
    else late = middle
  }
  return { startMin: early, servedMin: minutesWanted(need), serves: true }
}
