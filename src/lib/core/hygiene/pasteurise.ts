/**
 * The run that would pasteurise: how long the power must be on, from a tank full of mains water, until the water has been at the
 * policy's temperature for its hold. Water below the lowest element is told apart, since no run heats it.
 */
import { LONGEST_RUN_MIN, NODES } from '../tank/defaults.ts'
import { tankModel } from '../tank/model.ts'
import { simulate, uniformState } from '../tank/simulate.ts'
import type { TankSpec } from '../tank/types.ts'
import { HYGIENE_POLICIES, TEMPERATURE_MARGIN_K } from './policies.ts'
import type { HygienePolicyId } from './types.ts'

export interface PasteurisingRun {
  /** For the coldest water of the whole tank; `null` when no run does it. */
  readonly wholeTankMin: number | null
  /** For the water that an element heats; `null` when no run does it. */
  readonly heatedPartMin: number | null
  /** Coldest water of the whole tank after the longest run tried. */
  readonly coldestC: number
  readonly reason: string
}

export interface PasteuriseCase {
  readonly tank: TankSpec
  readonly supplyVoltageV: number
  readonly inletC: number
  readonly policy: HygienePolicyId
}

export function pasteurisingRun({ tank, supplyVoltageV, inletC, policy }: PasteuriseCase): PasteurisingRun {
  const rule = HYGIENE_POLICIES[policy]
  const model = tankModel(tank, { supplyVoltageV, inletC })
  const neededC = rule.temperatureC - TEMPERATURE_MARGIN_K
  const lowestHeated = model.lower?.node ?? model.upper?.node ?? -1
  const whole = holdClock(neededC, rule.holdMin)
  const heated = holdClock(neededC, rule.holdMin)
  let coldestC = inletC
  simulate(model, uniformState(inletC, NODES), {
    startMin: 0,
    endMin: LONGEST_RUN_MIN,
    on: [{ startMin: 0, endMin: LONGEST_RUN_MIN }],
    draws: [],
    sampleEveryMin: 1,
    sample: (minute, { nodesC }) => {
      coldestC = nodesC[NODES - 1] ?? inletC
      whole.at(minute, coldestC)
      if (lowestHeated >= 0) heated.at(minute, nodesC[lowestHeated] ?? inletC)
    },
  })
  const found = { wholeTankMin: whole.reachedMin(), heatedPartMin: heated.reachedMin(), coldestC }
  return { ...found, reason: reasonOf({ tank, neededC, rule, found }) }
}

interface Reason {
  readonly tank: TankSpec
  readonly neededC: number
  readonly rule: (typeof HYGIENE_POLICIES)[HygienePolicyId]
  readonly found: Omit<PasteurisingRun, 'reason'>
}

function reasonOf({ tank, neededC, rule, found }: Reason): string {
  const hold = rule.holdMin > 0 ? ` for ${rule.holdMin} min` : ''
  const goal = `${rule.temperatureC} °C${hold}`
  if (!tank.upperElement && !tank.lowerElement) return 'The tank has no element on record.'
  if (tank.setPointC < neededC) return `The thermostat is set to ${tank.setPointC} °C: no run reaches ${rule.temperatureC} °C.`
  if (found.wholeTankMin !== null) return `A run of ${found.wholeTankMin} min from cold brings the whole tank to ${goal}.`
  const below = `The water below the lowest element stays near ${Math.round(found.coldestC)} °C.`
  if (found.heatedPartMin !== null) return `A run of ${found.heatedPartMin} min from cold brings the heated part to ${goal}. ${below}`
  return `With the thermostat at ${tank.setPointC} °C the water does not stay at ${goal}. ${below}`
}

/** Counts how long a temperature has been held without a break; tells the first minute at which it was held long enough. */
function holdClock(neededC: number, holdMin: number) {
  let sinceMin: number | null = null
  let reachedMin: number | null = null
  return {
    at(minute: number, temperatureC: number): void {
      sinceMin = temperatureC >= neededC ? (sinceMin ?? minute) : null
      if (sinceMin !== null && minute - sinceMin >= holdMin) reachedMin ??= minute
    },
    reachedMin: (): number | null => reachedMin,
  }
}
