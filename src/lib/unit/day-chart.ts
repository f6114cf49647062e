/** A day's temperatures as pure geometry: outlet and coldest node, runs with their uncertainty, showers, peaks behind. */
import type { UnitDay, Readiness } from '#lib/core/tank/types.ts'
import { needEndMin } from '#lib/core/tank/cycle.ts'
import type { MinuteInterval } from '#lib/core/time/types.ts'
import { type ClockChange, clockWords } from '#lib/strip/clock.ts'
import { hatchPath } from '#lib/strip/hatch.ts'

export interface ChartDay {
  readonly dayMin: number
  readonly clockChange: ClockChange | null
  readonly peaks: readonly MinuteInterval[]
  readonly unit: UnitDay
  readonly readiness: Readiness
}

export const CHART = { widthPx: 720, heightPx: 300, leftPx: 44, rightPx: 12, topPx: 24, trackPx: 22, labelPx: 20 } as const
const HOUR_MIN = 60
const GRID_K = 20
const HEADROOM_K = 5
const HATCH_GAP_PX = 7

export function dayChart({ dayMin, clockChange, peaks, unit, readiness }: ChartDay) {
  const { widthPx, heightPx, leftPx, rightPx, topPx, trackPx, labelPx } = CHART
  const { trace, runs, needs } = readiness
  const plotBottomPx = heightPx - labelPx - trackPx
  const warmestC = Math.max(unit.tank.setPointC, ...trace.outletC) + HEADROOM_K
  const x = (minute: number) => round(leftPx + (Math.min(Math.max(minute, 0), dayMin) / dayMin) * (widthPx - leftPx - rightPx))
  const y = (temperatureC: number) => round(plotBottomPx - (Math.max(0, temperatureC) / warmestC) * (plotBottomPx - topPx))
  const line = (values: readonly number[]) =>
    values.map((value, index) => `${index === 0 ? 'M' : 'L'}${x(index * trace.sampleMin)} ${y(value)}`).join('')
  const box = ({ startMin, endMin }: MinuteInterval) => ({ xPx: x(startMin), widthPx: round(x(endMin) - x(startMin)) })
  const inDay = (on: MinuteInterval) => on.endMin > 0 && on.startMin < dayMin
  const track = { yPx: plotBottomPx + 4, heightPx: trackPx - 8 }
  return {
    plotTopPx: topPx,
    plotBottomPx,
    track,
    outlet: line(trace.outletC),
    coldest: line(trace.coldestC),
    grid: Array.from({ length: Math.floor(warmestC / GRID_K) + 1 }, (_, step) => ({ temperatureC: step * GRID_K, yPx: y(step * GRID_K) })),
    setPoint: { temperatureC: unit.tank.setPointC, yPx: y(unit.tank.setPointC) },
    use: needs[0] ? { temperatureC: needs[0].need.useTemperatureC, yPx: y(needs[0].need.useTemperatureC) } : null,
    peaks: peaks.map((peak) => {
      const one = box(peak)
      return { ...one, hatch: hatchPath({ ...one, yPx: topPx, heightPx: plotBottomPx - topPx }, HATCH_GAP_PX) }
    }),
    runs: runs.filter(inDay).map((on) => ({ ...box(on), tail: tailOf(on, { unit, box }) })),
    showers: needs.map((outcome) => ({
      ...box({ startMin: outcome.need.readyByMin, endMin: needEndMin(outcome.need) }),
      served: outcome.status === 'ready',
      words: `${clockWords(outcome.need.readyByMin, clockChange)}: ${outcome.status === 'ready' ? 'warm' : `warm for ${Math.floor(outcome.minutesServed)} of ${outcome.minutesWanted} min`}`,
    })),
    hours: Array.from({ length: Math.floor(dayMin / (3 * HOUR_MIN)) + 1 }, (_, step) => {
      const minute = step * 3 * HOUR_MIN
      return { xPx: x(minute), text: minute === dayMin ? '24' : clockWords(minute, clockChange).slice(0, 2) }
    }),
    sentence: sentenceOf({ dayMin, clockChange, peaks, unit, readiness }),
  }
}
export type DayChartGeometry = ReturnType<typeof dayChart>

/** What may still be on after the run that is expected: a pressed timer's longest, a clock's drift. */
function tailOf(
  on: MinuteInterval,
  { unit, box }: { readonly unit: UnitDay; readonly box: (on: MinuteInterval) => { readonly xPx: number; readonly widthPx: number } },
) {
  const { runs } = unit
  const laterMin = runs.kind === 'clocked' ? runs.uncertaintyMin : runs.longestMin === null ? Infinity : runs.longestMin - runs.expectedMin
  const tail = box({ startMin: on.endMin, endMin: on.endMin + laterMin })
  return tail.widthPx > 0 ? tail : null
}

/** The chart in words: what a reader of it would say. */
function sentenceOf({ clockChange, unit, readiness }: ChartDay): string {
  const { outletC, coldestC } = readiness.trace
  const at = (minute: number) => clockWords(minute, clockChange)
  const runs = readiness.runs.map((on) => `${at(on.startMin)} to ${at(on.endMin)}`)
  const showers = readiness.needs.map(
    (need) =>
      `${at(need.need.readyByMin)} ${need.status === 'ready' ? 'warm' : `warm for ${Math.floor(need.minutesServed)} of ${need.minutesWanted} minutes`}`,
  )
  return [
    `Outlet between ${whole(Math.min(...outletC))} and ${whole(Math.max(...outletC))} °C, coldest water between ${whole(Math.min(...coldestC))} and ${whole(Math.max(...coldestC))} °C; set to ${whole(unit.tank.setPointC)} °C.`,
    runs.length > 0 ? `Heating ${runs.join(', ')}.` : 'No run.',
    showers.length > 0 ? `Showers: ${showers.join(', ')}.` : '',
  ]
    .filter(Boolean)
    .join(' ')
}

/** Every second hour, for those who read figures rather than lines. */
export const hourly = ({
  clockChange,
  readiness: { trace },
}: ChartDay): readonly { readonly at: string; readonly outletC: number; readonly coldestC: number }[] =>
  trace.outletC.flatMap((outletC, index) => {
    const minute = index * trace.sampleMin
    return minute % (2 * HOUR_MIN) === 0 ? [{ at: clockWords(minute, clockChange), outletC, coldestC: trace.coldestC[index] ?? 0 }] : []
  })

const whole = (value: number): string => String(Math.round(value))
const round = (value: number): number => Math.round(value * 10) / 10
