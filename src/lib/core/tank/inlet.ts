/** Cold mains temperature by day of year: Burch and Christensen 2007 (NREL), in the form of OpenStudio-HPXML `weather.rb`, or measured months. */
import { dayOfYear } from '../time/civil.ts'
import type { Day } from '../time/types.ts'
import { cFromF, fFromC } from '../units.ts'
import type { InletClimate } from './types.ts'

const KELVIN_PER_F = 5 / 9

/** `swingAirK` is the difference of the warmest and the coldest month's mean air temperature. */
export function inletC(climate: InletClimate, day: Day): number {
  if (climate.kind === 'months') return climate.inletC[Number(day.slice(5, 7)) - 1] ?? 10
  const meanF = fFromC(climate.meanAirC)
  const swingF = climate.swingAirK / KELVIN_PER_F
  const ratio = 0.4 + 0.01 * (meanF - 44)
  const lagDays = 35 - (meanF - 44)
  const phaseDeg = climate.hemisphere === 'north' ? -90 : 90
  const angleRad = ((0.986 * (dayOfYear(day) - 15 - lagDays) + phaseDeg) * Math.PI) / 180
  const inletF = meanF + 6 + ratio * (swingF / 2) * Math.sin(angleRad)
  return Math.max(0, cFromF(inletF))
}
