/** Needs that no run whatever can serve. */
import { SERVED_MARGIN_K } from './defaults.ts'
import type { ShowerNeed, UnitDay } from './types.ts'

/** Why no run whatever could serve the need, or `null`. */
export function cannotEver({ tank }: UnitDay, need: ShowerNeed): string | null {
  if (!tank.upperElement && !tank.lowerElement) return 'The tank has no element on record.'
  if (tank.setPointC < need.useTemperatureC - SERVED_MARGIN_K)
    return `The thermostat is set to ${tank.setPointC} °C, below the ${need.useTemperatureC} °C wanted.`
  if (tank.mixingValveC !== null && tank.mixingValveC < need.useTemperatureC - SERVED_MARGIN_K)
    return `The mixing valve is set to ${tank.mixingValveC} °C, below the ${need.useTemperatureC} °C wanted.`
  return null
}
