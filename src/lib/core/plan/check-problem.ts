/** Whether a problem can be planned at all: every fault in words, so that nothing downstream meets NaN or a short array. */
import type { Need, NeededRun, PlanOptions, PlanProblem, ProblemFault, SlotInterval } from './types.ts'

const notNegative = (value: number) => Number.isFinite(value) && value >= 0
const whole = (value: number) => Number.isSafeInteger(value)

export function checkProblem(problem: PlanProblem, options: PlanOptions): ProblemFault[] {
  const faults: ProblemFault[] = []
  const say = (where: string, message: string) => void faults.push({ where, message })
  const series = (where: string, values: readonly number[], allowed: (value: number) => boolean, words: string) => {
    if (values.length !== problem.slots) say(where, `has ${values.length} values for ${problem.slots} slots`)
    else if (!values.every(allowed)) say(where, words)
  }

  if (!(Number.isFinite(problem.slotMin) && problem.slotMin > 0)) say('slotMin', 'must be above 0')
  if (!(whole(problem.slots) && problem.slots > 0)) say('slots', 'must be a whole number above 0')
  if (faults.length > 0) return faults
  // A price may be negative for some hours; load may not.
  series('energyPriceMinorPerKwh', problem.energyPriceMinorPerKwh, Number.isFinite, 'must be numbers')
  series('baseKw', problem.baseKw, notNegative, 'must be 0 or more')
  for (const limit of problem.limits) {
    series(`limits.${limit.id}.baseKw`, limit.baseKw, notNegative, 'must be 0 or more')
    if (!notNegative(limit.limitKw)) say(`limits.${limit.id}.limitKw`, 'must be 0 or more')
  }
  for (const charge of problem.demand) {
    if (!notNegative(charge.priceMinorPerKw)) say(`demand.${charge.id}.priceMinorPerKw`, 'must be 0 or more')
    if (!notNegative(charge.alreadyKw)) say(`demand.${charge.id}.alreadyKw`, 'must be 0 or more')
    if (!ascendingWithin(charge.windows, problem.slots))
      say(`demand.${charge.id}.windows`, 'must be whole, ascending, apart and inside the horizon')
  }
  for (const [name, value] of Object.entries(problem.weights)) if (!notNegative(value)) say(`weights.${name}`, 'must be 0 or more')
  if (!whole(options.seed)) say('options.seed', 'must be a whole number')
  if (!notNegative(options.targetGapFraction)) say('options.targetGapFraction', 'must be 0 or more')
  if (!(Number.isFinite(options.effort) && options.effort > 0)) say('options.effort', 'must be above 0')
  checkNeeds(problem, say)
  return faults
}

function ascendingWithin(windows: readonly SlotInterval[], slots: number): boolean {
  let last = 0
  for (const { from, to } of windows) {
    if (!(whole(from) && whole(to) && from >= last && to > from && to <= slots)) return false
    last = to
  }
  return true
}

type Say = (where: string, message: string) => void

function checkNeeds(problem: PlanProblem, say: Say): void {
  const needIds = new Set<string>()
  const runIds = new Set<string>()
  for (const need of problem.needs) {
    if (needIds.has(need.id)) say(`needs.${need.id}`, 'is there twice')
    needIds.add(need.id)
    if (need.runs.length === 0) say(`needs.${need.id}`, 'has no run')
    for (const run of need.runs) {
      if (runIds.has(run.id)) say(`runs.${run.id}`, 'is there twice')
      runIds.add(run.id)
      checkRun(problem, need, run, say)
    }
  }
}

function checkRun(problem: PlanProblem, need: Need, run: NeededRun, say: Say): void {
  const at = (field: string) => `needs.${need.id}.${run.id}.${field}`
  if (!notNegative(run.powerKw)) say(at('powerKw'), 'must be 0 or more')
  if (run.limitKw.length !== problem.limits.length)
    say(at('limitKw'), `has ${run.limitKw.length} values for ${problem.limits.length} limits`)
  else if (!run.limitKw.every(notNegative)) say(at('limitKw'), 'must be 0 or more')
  if (!(whole(run.worstSlots) && run.worstSlots > 0)) say(at('worstSlots'), 'must be a whole number above 0')
  if (!(run.expectedMin > 0 && run.expectedMin <= run.worstSlots * problem.slotMin + 1e-9))
    say(at('expectedMin'), 'must be above 0 and no longer than the worst case')
  if (!(whole(run.shortestWorstSlots) && run.shortestWorstSlots > 0 && run.shortestWorstSlots <= run.worstSlots))
    say(at('shortestWorstSlots'), 'must be a whole number from 1 to worstSlots')
  if (!(whole(run.startStep) && run.startStep > 0)) say(at('startStep'), 'must be a whole number above 0')
  for (const field of ['startOffset', 'earliestStartSlot', 'latestStartSlot'] as const)
    if (!whole(run[field])) say(at(field), 'must be a whole number')
  if (!Number.isFinite(run.readyBySlot)) say(at('readyBySlot'), 'must be a number')
  if (!notNegative(run.standingLossMinorPerH)) say(at('standingLossMinorPerH'), 'must be 0 or more')
  if (run.habitSlot !== null && !Number.isFinite(run.habitSlot)) say(at('habitSlot'), 'must be a number or null')
  if (run.pinnedSlot !== null && !whole(run.pinnedSlot)) say(at('pinnedSlot'), 'must be a whole number or null')
  if (!run.startWindows.every(({ from, to }) => whole(from) && whole(to) && to >= from))
    say(at('startWindows'), 'must be whole slots, from before to')
}
