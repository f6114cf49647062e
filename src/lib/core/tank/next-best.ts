/** Nearest ready-by times that would work with today's hardware, nearest first. */
import { cycleOf, minutesWanted, run, servedByNeed, settledState } from './cycle.ts'
import { runsBefore } from './required-run.ts'
import type { ShowerNeed, UnitDay } from './types.ts'

const STEP_MIN = 15
const REACH_MIN = 180
const SUGGESTIONS = 3

export function nextBestReadyBy(day: UnitDay, need: ShowerNeed): readonly number[] {
  const found: number[] = []
  for (let away = STEP_MIN; away <= REACH_MIN && found.length < SUGGESTIONS; away += STEP_MIN) {
    for (const readyByMin of [need.readyByMin + away, need.readyByMin - away]) {
      if (readyByMin >= 0 && found.length < SUGGESTIONS && works(day, need, readyByMin)) found.push(readyByMin)
    }
  }
  return found
}

function works(day: UnitDay, need: ShowerNeed, readyByMin: number): boolean {
  const moved: ShowerNeed = { ...need, readyByMin }
  const cycle = cycleOf({ ...day, needs: day.needs.map((other) => (other === need ? moved : other)) })
  const index = cycle.needs.indexOf(moved)
  const on = day.runs.kind === 'clocked' ? day.runs.onIntervals : runsBefore(cycle, day.runs.guaranteedMin)
  const served = servedByNeed(cycle, run(cycle, settledState(cycle, on), on))
  return (served[index] ?? 0) >= minutesWanted(moved) - 1e-6
}
