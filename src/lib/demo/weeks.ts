/** Weeks of showers for the demo's tenants, built from a morning, a weekend morning and some evenings. */
import { DEFAULT_FLOW_L_PER_MIN, DEFAULT_GAP_MIN, DEFAULT_USE_TEMPERATURE_C, type Shower, type Week } from '#lib/preference/week.ts'

export const at = (hour: number, minute = 0): number => hour * 60 + minute

export const shower = (readyByMinuteOfDay: number, count = 1, minutesEach = 8): Shower => ({
  readyByMinuteOfDay,
  count,
  minutesEach,
  gapMin: DEFAULT_GAP_MIN,
  flowLPerMin: DEFAULT_FLOW_L_PER_MIN,
  useTemperatureC: DEFAULT_USE_TEMPERATURE_C,
})

export interface WeekChoice {
  readonly weekdays: readonly Shower[]
  readonly weekend: readonly Shower[]
  /** Added on Friday evening. */
  readonly friday?: readonly Shower[]
}

export const week = ({ weekdays, weekend, friday = [] }: WeekChoice): Week => {
  const workday = [...weekdays]
  return [workday, workday, workday, workday, [...workday, ...friday], [...weekend], [...weekend]]
}
