/** What the tank says of a start, allowed or not. Pure. */
import { type Served, servedAt } from '#lib/core/tank/start-at.ts'
import type { UnitDay } from '#lib/core/tank/types.ts'

export interface WaterWeek {
  readonly code: string
  readonly days: readonly { readonly startsAtMs: number; readonly unit: UnitDay }[]
}
export type WaterVerdict = Served

const MS_PER_MIN = 60_000

/** Starts by their need's ready-by, instants; needs that are not in it start as the week has it. `null`: no such need. */
export function waterAt(
  { days }: WaterWeek,
  { readyByAtMs, starts }: { readonly readyByAtMs: number; readonly starts: ReadonlyMap<number, number> },
): WaterVerdict | null {
  const readyAt = (day: WaterWeek['days'][number], need: UnitDay['needs'][number]) => day.startsAtMs + need.readyByMin * MS_PER_MIN
  const elapsed = (day: WaterWeek['days'][number], instantMs: number) => (instantMs - day.startsAtMs) / MS_PER_MIN
  const told = days.map((day): UnitDay => {
    const agreedStartMin = day.unit.needs.map((need, index) => {
      const wantedMs = starts.get(readyAt(day, need))
      return wantedMs === undefined ? (day.unit.agreedStartMin?.[index] ?? null) : elapsed(day, wantedMs)
    })
    return { ...day.unit, agreedStartMin }
  })
  const at = days.findIndex((day) => day.unit.needs.some((need) => readyAt(day, need) === readyByAtMs))
  const day = days[at]
  const startsAtMs = starts.get(readyByAtMs)
  if (!day || startsAtMs === undefined) return null
  const need = day.unit.needs.findIndex((one) => readyAt(day, one) === readyByAtMs)
  return servedAt(told, { day: at, need, startMin: elapsed(day, startsAtMs) })
}
