/** From records to the core's input: a tenant's wall-clock week becomes elapsed minutes of one local day, right on clock-change days too. */
import { runDuration } from '#lib/core/controller/run-duration.ts'
import { runSource } from '#lib/core/controller/run-source.ts'
import type { DurationOutcome, RunSource } from '#lib/core/controller/types.ts'
import type { ShowerNeed, UnitDay } from '#lib/core/tank/types.ts'
import { elapsedOf, offsetMin } from '#lib/core/time/civil.ts'
import type { MinuteInterval } from '#lib/core/time/types.ts'
import { MIN_PER_DAY } from '#lib/core/units.ts'
import type { Preference } from '#db/queries/preference.ts'
import type { AgreedStart, DayContext, Site, UnitHardware, Wants } from './types.ts'

interface Moment {
  readonly site: Pick<Site, 'zone' | 'supplyVoltageV'>
  readonly context: DayContext
}

export function needsOf(week: Preference['week'], { site, context }: Moment): readonly ShowerNeed[] {
  return (week[context.weekday] ?? [])
    .map((shower) => ({
      readyByMin: elapsedOf(context.day, shower.readyByMinuteOfDay, site.zone),
      count: shower.count,
      minutesEach: shower.minutesEach,
      gapMin: shower.gapMin,
      flowLPerMin: shower.flowLPerMin,
      useTemperatureC: shower.useTemperatureC,
    }))
    .sort((one, other) => one.readyByMin - other.readyByMin)
}

const willingOf = (willing: Preference['willing'], { site, context }: Moment): readonly MinuteInterval[] =>
  willing.map((hours) => ({
    startMin: elapsedOf(context.day, hours.fromMinuteOfDay, site.zone),
    endMin: elapsedOf(context.day, hours.toMinuteOfDay, site.zone),
  }))

/** A switch that does not follow clock changes was right when it was recorded; it is ahead by what the zone has gone back since. */
export const clockOffsetMin = (hardware: Pick<UnitHardware, 'recordedAtMs'>, { site, context }: Moment): number =>
  offsetMin(hardware.recordedAtMs, site.zone) - offsetMin(context.startsAtMs + context.dayMin * 30_000, site.zone)

export const durationOf = ({ installation, measured }: Pick<UnitHardware, 'installation' | 'measured'>): DurationOutcome =>
  runDuration(installation.controller, measured)

export const runsOf = (hardware: UnitHardware, duration: DurationOutcome, moment: Moment): RunSource =>
  runSource(hardware.installation.controller, {
    day: moment.context.day,
    duration,
    toElapsedMin: (minuteOfDay) => elapsedOf(moment.context.day, minuteOfDay, moment.site.zone),
    aheadAtStartMin: offsetMin(hardware.recordedAtMs, moment.site.zone) - offsetMin(moment.context.startsAtMs, moment.site.zone),
  })

interface UnitCase extends Moment {
  readonly hardware: UnitHardware
  readonly duration: DurationOutcome
  readonly week: Preference['week']
  readonly willing: Preference['willing']
  readonly agreed?: readonly AgreedStart[]
}

/** Whose showers nobody has told, and who is not there, wants none. */
export const wantedOf = (wants: Wants | undefined): Pick<UnitCase, 'week' | 'willing' | 'agreed'> =>
  wants?.kind === 'week'
    ? { week: wants.week, willing: wants.willing, ...(wants.agreed ? { agreed: wants.agreed } : {}) }
    : { week: [], willing: [] }

export function unitDayOf({ site, context, hardware, duration, week, willing, agreed }: UnitCase): UnitDay {
  const needs = needsOf(week, { site, context })
  return {
    tank: hardware.installation.load.tank,
    supplyVoltageV: site.supplyVoltageV,
    inletC: context.inletC,
    runs: runsOf(hardware, duration, { site, context }),
    needs,
    willing: willingOf(willing, { site, context }),
    ...(agreed ? { agreedStartMin: needs.map((need) => agreedFor(agreed, need.readyByMin)) } : {}),
    // Left out of ordinary days, so that equal days are equal to the memo too.
    ...(context.dayMin === MIN_PER_DAY ? {} : { lengthMin: context.dayMin }),
    start: { kind: 'periodic' },
  }
}

/** A need at another time is another need: what was agreed does not hold for it. */
const agreedFor = (agreed: readonly AgreedStart[], readyByMin: number): number | null =>
  agreed.find((one) => one.readyByMin === readyByMin)?.startMin ?? null
