/** Single changes of anything but the timer that would make a short unit ready on every day; the model ran again with each. Pure. */
import { SERVED_MARGIN_K } from '#lib/core/tank/defaults.ts'
import { actualPowerW } from '#lib/core/tank/model.ts'
import { servesWeek } from '#lib/core/tank/serves-week.ts'
import type { HeatingElement, UnitDay } from '#lib/core/tank/types.ts'
import type { Fix } from './fixes.ts'

/** Elements that are sold (common practice, no source). */
const ELEMENTS_W = [2_000, 2_500, 3_000, 3_500, 3_800, 4_500, 5_500, 6_000] as const
/** A shower head that saves water (common practice, no source). */
const FLOWS_L_PER_MIN = [7.6, 6, 4.5] as const
/** Higher than this the store is hotter than any guidance asks (common practice, no source). */
const HIGHEST_SET_POINT_C = 65
const SET_POINT_STEP_K = 5
const SHORTEST_SHOWER_MIN = 4

export function otherFixes(days: readonly UnitDay[]): readonly Fix[] {
  return [element(days), setPoint(days), flow(days), shorter(days)].filter((fix) => fix !== null)
}

function element(days: readonly UnitDay[]): Fix | null {
  const [first] = days
  const own = first && (first.tank.upperElement ?? first.tank.lowerElement)
  if (!first || !own) return null
  const with_ = (ratedPowerW: number) => (one: HeatingElement | null) => one && { ...one, ratedPowerW }
  const ratedPowerW = ELEMENTS_W.filter((powerW) => powerW > own.ratedPowerW).find((powerW) =>
    servesWeek(
      days.map((day) => ({
        ...day,
        tank: { ...day.tank, upperElement: with_(powerW)(day.tank.upperElement), lowerElement: with_(powerW)(day.tank.lowerElement) },
      })),
    ),
  )
  if (ratedPowerW === undefined) return null
  const realW = Math.round(actualPowerW({ ...own, ratedPowerW }, first.supplyVoltageV))
  return {
    label: `Fit elements of ${ratedPowerW} W at ${own.ratedVoltageV} V`,
    value: `${realW} W at this supply; contacts, conductor and breaker have to carry it: check them first`,
  }
}

function setPoint(days: readonly UnitDay[]): Fix | null {
  const now = days[0]?.tank.setPointC ?? HIGHEST_SET_POINT_C
  for (
    let setPointC = (Math.floor(now / SET_POINT_STEP_K) + 1) * SET_POINT_STEP_K;
    setPointC <= HIGHEST_SET_POINT_C;
    setPointC += SET_POINT_STEP_K
  ) {
    if (!servesWeek(days.map((day) => ({ ...day, tank: { ...day.tank, setPointC } })))) continue
    const mixed = days[0]?.tank.mixingValveC !== null
    return {
      label: `Set the thermostat to ${setPointC} °C`,
      value: mixed ? 'the mixing valve limits the tap' : 'only with a mixing valve: it scalds',
    }
  }
  return null
}

function flow(days: readonly UnitDay[]): Fix | null {
  const most = Math.max(0, ...days.flatMap((day) => day.needs.map((need) => need.flowLPerMin)))
  const found = FLOWS_L_PER_MIN.filter((flowLPerMin) => flowLPerMin < most - 0.5).find((flowLPerMin) =>
    servesWeek(
      days.map((day) => ({ ...day, needs: day.needs.map((need) => ({ ...need, flowLPerMin: Math.min(need.flowLPerMin, flowLPerMin) })) })),
    ),
  )
  return found === undefined ? null : { label: `Fit a shower head of ${found} L/min`, value: `instead of ${most} L/min` }
}

function shorter(days: readonly UnitDay[]): Fix | null {
  const longest = Math.max(0, ...days.flatMap((day) => day.needs.map((need) => need.minutesEach)))
  for (let minutesEach = longest - 1; minutesEach >= SHORTEST_SHOWER_MIN; minutesEach--) {
    if (
      !servesWeek(
        days.map((day) => ({
          ...day,
          needs: day.needs.map((need) => ({ ...need, minutesEach: Math.min(need.minutesEach, minutesEach) })),
        })),
      )
    )
      continue
    return {
      label: `Showers of ${minutesEach} min`,
      value: `instead of ${longest} min; served within ${SERVED_MARGIN_K} K of what is wanted`,
    }
  }
  return null
}
