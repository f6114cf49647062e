/** A day of the uniform test method as a programme of the tank model. */
import { NODES } from '#lib/core/tank/defaults.ts'
import { tankModel } from '#lib/core/tank/model.ts'
import { type MixedDraw, simulate, uniformState } from '#lib/core/tank/simulate.ts'
import type { TankSpec } from '#lib/core/tank/types.ts'
import { kwhFromJ, lFromUsGal } from '#lib/core/units.ts'
import { CERTIFICATION_C, PATTERNS } from '../fixtures/tank/certification.data.ts'

export const certificationDraws = (pattern: keyof typeof PATTERNS, startMin = 0): readonly MixedDraw[] =>
  PATTERNS[pattern].map(([atMin, volumeGal, flowGpm]) => ({
    startMin: startMin + atMin,
    endMin: startMin + atMin + volumeGal / flowGpm,
    flowLPerMin: lFromUsGal(flowGpm),
    useTemperatureC: null,
  }))

/** 50 US gal nominal, 170.34 L, two elements of 4.5 kW, at the conditions of the test; dead band of OCHRE. */
export const certificationTank = (lossWPerK: number, volumeL = 170.34): TankSpec => ({
  nominalVolumeL: volumeL / 0.9,
  actualVolumeL: volumeL,
  heightM: 1.22,
  loss: { kind: 'ua', lossWPerK },
  upperElement: { ratedPowerW: 4_500, ratedVoltageV: 240 },
  lowerElement: { ratedPowerW: 4_500, ratedVoltageV: 240 },
  shareAboveUpperFraction: 1 / 4,
  setPointC: CERTIFICATION_C.setPointC,
  deadBandK: 50 / 9,
  ambientC: CERTIFICATION_C.ambientC,
  mixingValveC: null,
})

/** A day of the pattern from seven in the morning on, repeated: energy in and delivered a day, averaged over whole thermostat cycles. */
export function dailyMean({ lossWPerK, on, pattern = 'medium', volumeL = 170.34 }: DailyCase): {
  readonly inKwh: number
  readonly outKwh: number
} {
  const tank = tankModel({ ...certificationTank(lossWPerK, volumeL), shareBelowLowerFraction: 1 / 6 }, SITE)
  const draws = certificationDraws(pattern, MORNING_MIN)
  // From seven to seven: the pattern ends after midnight, and the power's hours come round again.
  const hours = on.flatMap(({ startMin, endMin }) => [0, 1_440].map((day) => ({ startMin: startMin + day, endMin: endMin + day })))
  let state = uniformState(tank.setPointC, NODES)
  let inJ = 0
  let outJ = 0
  for (let day = -SETTLING_DAYS; day < COUNTED_DAYS; day++) {
    const simulation = simulate(tank, state, { startMin: MORNING_MIN, endMin: MORNING_MIN + 1_440, on: hours, draws })
    state = simulation.end
    if (day < 0) continue
    inJ += simulation.energyInJ
    outJ += simulation.energyDeliveredJ
  }
  return { inKwh: kwhFromJ(inJ) / COUNTED_DAYS, outKwh: kwhFromJ(outJ) / COUNTED_DAYS }
}

interface DailyCase {
  readonly lossWPerK: number
  readonly on: readonly { readonly startMin: number; readonly endMin: number }[]
  readonly pattern?: keyof typeof PATTERNS
  readonly volumeL?: number
}
const SITE = {
  supplyVoltageV: 240,
  inletC: CERTIFICATION_C.inletC,
  water: { heatCapacityJPerLK: 4_183, conductivityWPerMK: 0.6406 },
} as const
const MORNING_MIN = 420
const SETTLING_DAYS = 5
const COUNTED_DAYS = 30
