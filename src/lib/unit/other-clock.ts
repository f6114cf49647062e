/** The other half of a year for a time switch that does not follow clock changes. Pure. */
import type { OtherClock } from '#lib/core/tank/outlook.ts'
import { addDays, civilOf, clockChangesIn, offsetMin, weekdayOf } from '#lib/core/time/civil.ts'
import type { Day } from '#lib/core/time/types.ts'
import { MIN_PER_DAY, MS_PER_MIN } from '#lib/core/units.ts'
import { dayContext } from '#lib/evaluation/day-context.ts'
import type { PropertyInputs } from '#lib/evaluation/load-inputs.server.ts'
import { durationOf, unitDayOf, wantedOf } from '#lib/evaluation/unit-day.ts'

const YEAR_DAYS = 366

/** The week that a switch gives which does not follow the coming clock change, and the days of the year on which it stands so. */
export function otherClockOf({ site, contexts, units }: Pick<PropertyInputs, 'site' | 'contexts' | 'units'>): OtherClock | null {
  const [own] = units
  const [first] = contexts
  if (!own?.hardware || !first) return null
  const { hardware, wants } = own
  const { controller } = hardware.installation
  if (controller.kind !== 'time-switch' || controller.followsClockChange) return null
  const until = addDays(first.day, YEAR_DAYS)
  const nowMin = offsetMin(first.startsAtMs, site.zone)
  const spans: { from: Day; to: Day }[] = []
  for (const { atMs } of clockChangesIn(
    { startsAtMs: first.startsAtMs, endsAtMs: first.startsAtMs + YEAR_DAYS * MIN_PER_DAY * MS_PER_MIN },
    site.zone,
  )) {
    const { day } = civilOf(atMs, site.zone)
    if (offsetMin(atMs, site.zone) === nowMin) {
      const open = spans.at(-1)
      if (open) open.to = day
    } else if (spans.at(-1)?.to !== until) spans.push({ from: day, to: until })
  }
  const [span] = spans
  if (!span) return null
  const duration = durationOf(hardware)
  // From the day after the change on, in the order of this week's weekdays.
  const startDay = contexts.map((_, index) => addDays(span.from, index + 1)).find((day) => weekdayOf(day) === first.weekday) ?? span.from
  return {
    spans,
    days: contexts.map((_, index) =>
      unitDayOf({ site, context: dayContext(site, addDays(startDay, index)), hardware, duration, ...wantedOf(wants[index]) }),
    ),
  }
}
