/** How long water at a set point takes to burn: the shortest published time, since children burn faster. */
import type { ScaldFinding } from './types.ts'

/** °C and seconds: 120 to 155 °F as published by CPSC (document 5098) and in a heater maker's manual; the shorter of each. */
const SHORTEST: readonly { readonly fromC: number; readonly seconds: number }[] = [
  { fromC: 68.3, seconds: 1 },
  { fromC: 65.6, seconds: 1.5 },
  { fromC: 62.8, seconds: 3 },
  { fromC: 60, seconds: 5 },
  { fromC: 57.2, seconds: 10 },
  { fromC: 54.4, seconds: 30 },
  { fromC: 51.7, seconds: 90 },
  { fromC: 48.9, seconds: 300 },
]

/** A mixing valve limits what reaches the tap; without one the set point does. */
export function assessScald(setPointC: number, mixingValveC: number | null): ScaldFinding {
  const atTapC = Math.min(setPointC, mixingValveC ?? setPointC)
  const row = SHORTEST.find((one) => atTapC >= one.fromC)
  return {
    setPointC,
    secondsToBurn: row?.seconds ?? null,
    source: 'CPSC document 5098 and a heater maker’s scald table; the shorter time of each temperature',
    atRisk: mixingValveC === null && setPointC > 49,
  }
}
