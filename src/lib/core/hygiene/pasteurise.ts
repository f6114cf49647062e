/**
 * The run that would pasteurise: how long the power must be on, from a tank full of mains water, until the water has been at 60 °C
 * for an hour, whatever guidance is followed. Water below the lowest element is told apart, since no run heats it.
 */
import { LONGEST_RUN_MIN, NODES } from '../tank/defaults.ts'
import { tankModel } from '../tank/model.ts'
import { simulate, uniformState } from '../tank/simulate.ts'
import type { TankSpec } from '../tank/types.ts'
import { holdWords, PASTEURISED, TEMPERATURE_MARGIN_K } from './policies.ts'

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
}

const NEEDED_C = PASTEURISED.temperatureC - TEMPERATURE_MARGIN_K

export function pasteurisingRun({ tank, supplyVoltageV, inletC }: PasteuriseCase): PasteurisingRun {
  const model = tankModel(tank, { supplyVoltageV, inletC })
  const lowestHeated = model.lower?.node ?? model.upper?.node ?? -1
  const whole = holdClock(NEEDED_C, PASTEURISED.holdMin)
  const heated = holdClock(NEEDED_C, PASTEURISED.holdMin)
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
  return { ...found, reason: reasonOf(tank, found) }
}

function reasonOf(tank: TankSpec, found: Omit<PasteurisingRun, 'reason'>): string {
  const goal = holdWords(PASTEURISED)
  if (!tank.upperElement && !tank.lowerElement) return 'The tank has no element on record.'
  if (tank.setPointC < NEEDED_C) return `The thermostat is set to ${tank.setPointC} °C: no run reaches ${PASTEURISED.temperatureC} °C.`
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
