/** How long water at a set point takes to burn: the shortest published time, since children burn faster. */
import type { ScaldFinding } from './types.ts'

/**
 * Seconds to a third-degree burn by temperature, whole °F as printed. Sources conflict (at 140 °F: CPSC 6 s, Burn Foundation and
 * ASSE trade pages 5 s; at 120 °F: CPSC 5 min, a university page 10 min): each row is the shortest of them, for warnings only.
 */
export const SCALD_TABLE = [
  { temperatureF: 155, seconds: 1, cpscSeconds: null },
  { temperatureF: 150, seconds: 1.5, cpscSeconds: 2 },
  { temperatureF: 145, seconds: 3, cpscSeconds: null },
  { temperatureF: 140, seconds: 5, cpscSeconds: 6 },
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
const cOf = (temperatureF: number): number => ((temperatureF - 32) * 5) / 9

/** A mixing valve limits what reaches the tap; without one the set point does. */
export function assessScald(setPointC: number, mixingValveC: number | null): ScaldFinding {
  const atTapC = Math.min(setPointC, mixingValveC ?? setPointC)
  const row = SCALD_TABLE.find((one) => atTapC >= cOf(one.temperatureF) - ROUNDING_K)
  return {
    setPointC,
    secondsToBurn: row?.seconds ?? null,
    source: 'CPSC document 5098 and other published scald tables; the shortest time of each temperature',
    atRisk: atTapC > SCALD_LIMIT_C,
  }
}
