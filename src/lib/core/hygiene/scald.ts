/** How long water at a set point takes to burn: the shortest published time, since children burn faster. */
import { cFromF } from '../units.ts'
import type { ScaldFinding } from './types.ts'

/**
 * Seconds to a burn by temperature, whole °F as printed. Sources conflict (140 °F: CPSC 6 s, Burn Foundation 5 s, 3 s for a
 * second-degree burn; 120 °F: CPSC 5 min, a university page 10 min; 130 °F: 30 and 35 s): each row is the shortest of them, for
 * warnings only. An adult's: one source gives a child 1 s at 140 °F.
 */
export const SCALD_TABLE = [
  { temperatureF: 155, seconds: 1, cpscSeconds: null },
  { temperatureF: 150, seconds: 1.5, cpscSeconds: 2 },
  { temperatureF: 145, seconds: 3, cpscSeconds: null },
  { temperatureF: 140, seconds: 3, cpscSeconds: 6 },
  { temperatureF: 135, seconds: 10, cpscSeconds: null },
  { temperatureF: 133, seconds: 15, cpscSeconds: null },
  { temperatureF: 130, seconds: 30, cpscSeconds: 30 },
  { temperatureF: 125, seconds: 90, cpscSeconds: null },
  { temperatureF: 120, seconds: 300, cpscSeconds: 300 },
] as const

/** Above this the tap needs a mixing valve or a warning: CPSC's and US DOE's 120 °F, rounded up to whole °C. */
export const SCALD_LIMIT_C = 49
/** Set points are told in whole °C: 60 °C is 140 °F, 49 °C is 120 °F, and half a degree decides between them. */
const ROUNDING_K = 0.5

/** A mixing valve limits what reaches the tap; without one the set point does. */
export function assessScald(setPointC: number, mixingValveC: number | null): ScaldFinding {
  const atTapC = Math.min(setPointC, mixingValveC ?? setPointC)
  const row = SCALD_TABLE.find((one) => atTapC >= cFromF(one.temperatureF) - ROUNDING_K)
  return {
    setPointC,
    atTapC,
    secondsToBurn: row?.seconds ?? null,
    source: 'CPSC document 5098 and other published scald tables; the shortest time of each temperature',
    atRisk: atTapC > SCALD_LIMIT_C,
  }
}
