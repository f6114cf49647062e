/** The rules of a plan, checked slot by slot from the problem alone: shares no code with the planner. */
import type { PlannedRun, PlanProblem } from '#lib/core/plan/types.ts'

/** Every broken rule in words; empty for a plan that keeps them all. */
export function brokenRules(problem: PlanProblem, starts: readonly PlannedRun[]): string[] {
  const broken: string[] = []
  const startOf = new Map<string, number>()
  for (const { runId, startSlot } of starts) {
    if (startOf.has(runId)) broken.push(`${runId} has two starts`)
    startOf.set(runId, startSlot)
  }
  const known = new Set(problem.needs.flatMap(({ runs }) => runs.map(({ id }) => id)))
  for (const id of startOf.keys()) if (!known.has(id)) broken.push(`${id} is no run of the problem`)
  const units = new Map<string, number>()
  for (const need of problem.needs) {
    const served = need.runs.filter(({ id }) => startOf.has(id)).length
    if (served > 0 && served < need.runs.length) broken.push(`${need.id} is served in part`)
    for (const run of need.runs) {
      const start = startOf.get(run.id)
      if (start === undefined) continue
      if (!Number.isInteger(start) || start < 0 || start + run.worstSlots > problem.slots) broken.push(`${run.id} leaves the horizon`)
      if (start < run.earliestStartSlot) broken.push(`${run.id} starts too early`)
      if (start > run.latestStartSlot) broken.push(`${run.id} starts too late`)
      if (!run.startWindows.some(({ from, to }) => from <= start && start < to)) broken.push(`${run.id} starts outside its hours`)
      if (!Number.isInteger((start - run.startOffset) / run.startStep)) broken.push(`${run.id} starts between steps`)
      if (run.pinnedSlot !== null && run.pinnedSlot !== start) broken.push(`${run.id} left its pin`)
      const free = units.get(need.unitId) ?? 0
      if (start < free) broken.push(`${run.id} begins before its unit's last run has surely ended`)
      units.set(need.unitId, start + run.worstSlots)
    }
  }
  problem.limits.forEach((limit, place) => {
    for (let slot = 0; slot < problem.slots; slot++) {
      let kw = 0
      for (const { runs } of problem.needs)
        for (const run of runs) {
          const start = startOf.get(run.id)
          if (start !== undefined && slot >= start && slot < start + run.worstSlots) kw += run.limitKw[place] ?? NaN
        }
      // A milliwatt: rounding of sums, far below the watt in which the planner counts.
      if (kw > 0 && !(kw + (limit.baseKw[slot] ?? NaN) <= limit.limitKw + 1e-6)) broken.push(`${limit.id} is passed in slot ${slot}`)
    }
  })
  return broken
}

/** What starts cost, minute by minute from the model's words. */
export function costByTheMinute(problem: PlanProblem, starts: readonly PlannedRun[]): number {
  const { slotMin, weights } = problem
  const startOf = new Map(starts.map(({ runId, startSlot }) => [runId, startSlot]))
  const expectedKwMin = new Array<number>(problem.slots).fill(0)
  const worstKw = [...problem.baseKw]
  let cost = 0
  for (const run of problem.needs.flatMap(({ runs }) => runs)) {
    const start = startOf.get(run.id)
    if (start === undefined) continue
    const beginsMin = start * slotMin
    const endsMin = beginsMin + run.expectedMin
    for (let slot = start; slot < start + run.worstSlots; slot++) {
      const onMin = Math.max(0, Math.min(endsMin, (slot + 1) * slotMin) - slot * slotMin)
      expectedKwMin[slot] = (expectedKwMin[slot] ?? NaN) + run.powerKw * onMin
      worstKw[slot] = (worstKw[slot] ?? NaN) + run.powerKw
      cost += (run.powerKw * onMin * (problem.energyPriceMinorPerKwh[slot] ?? NaN)) / 60
    }
    cost += (weights.standingLoss * run.standingLossMinorPerH * Math.max(0, run.readyBySlot * slotMin - endsMin)) / 60
    if (run.habitSlot !== null) cost += (weights.habitMinorPerH * Math.abs(run.habitSlot - start) * slotMin) / 60
  }
  for (const charge of problem.demand) {
    const meanKw = (withRuns: boolean) =>
      charge.windows.map(({ from, to }) => {
        let kwMin = 0
        for (let slot = from; slot < to; slot++)
          kwMin += (problem.baseKw[slot] ?? NaN) * slotMin + (withRuns ? (expectedKwMin[slot] ?? NaN) : 0)
        return kwMin / ((to - from) * slotMin)
      })
    const floorKw = Math.max(charge.alreadyKw, ...meanKw(false))
    cost += charge.priceMinorPerKw * (Math.max(floorKw, ...meanKw(true)) - floorKw)
  }
  return cost + weights.evennessMinorPerKw * (Math.max(...worstKw) - Math.max(...problem.baseKw))
}
