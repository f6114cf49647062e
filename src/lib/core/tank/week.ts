/**
 * Whether a unit's water is ready for each need of a week, and the numbers that say why: required run, start-by, shortfall.
 * Pressed timers: one press a need, at its start-by, with the run that can be counted on. Clocked: the clock's own hours.
 */
import { kwhFromJ } from '../units.ts'
import { chainOf } from './chain.ts'
import { needOutcome } from './need-outcome.ts'
import { plansOf } from './plan.ts'
import { requiredRuns } from './required-run.ts'
import { sampled, traceOf } from './trace.ts'
import type { NeedOutcome, Readiness, UnitDay } from './types.ts'

/**
 * Readiness of each day, every one from what the days before it leave. A periodic programme repeats its first seven days until
 * they repeat themselves; days beyond the seventh follow it. A day whose start is told begins from that, whatever went before.
 */
export function assessWeek(days: readonly UnitDay[]): readonly Readiness[] {
  const chain = chainOf(days)
  const required = requiredRuns(days, chain)
  const plans = plansOf({ days, chain }, required)
  const { expected } = plans
  const curves = chain.cycles.map((cycle, index) => sampled(cycle, expected.before[index]!, expected.on[index]!))
  return days.map((_, index) => {
    const [cycle, simulation] = [chain.cycles[index]!, expected.simulations[index]!]
    const needs = cycle.needs.map((__, at) =>
      needOutcome({ week: { days, chain }, plans, dayIndex: index, index: at, shape: required[index]?.[at] ?? null }),
    )
    return {
      status: statusOf(needs),
      needs,
      runs: expected.on[index]!.filter((on) => on.endMin > cycle.startMin && on.startMin < cycle.endMin),
      heating: simulation.heating,
      energyInKwh: kwhFromJ(simulation.energyInJ),
      energyDeliveredKwh: kwhFromJ(simulation.energyDeliveredJ),
      energyLostKwh: kwhFromJ(simulation.energyLostJ),
      trace: traceOf(curves, index),
      startNodesC: expected.before[index]!.nodesC,
      endNodesC: simulation.end.nodesC,
    }
  })
}

/** A day that repeats itself, or that begins as told. */
export const assessReadiness = (day: UnitDay): Readiness => assessWeek([day])[0] as Readiness

function statusOf(needs: readonly NeedOutcome[]): Readiness['status'] {
  if (needs.length === 0) return 'no-need'
  const statuses = needs.map((need) => need.status)
  return statuses.includes('impossible') ? 'impossible' : statuses.includes('short') ? 'short' : 'ready'
}
