/** The form of a week, and what the browser needs to answer while the tenant chooses: their own heater's figures and nothing else. */
import type { OrgDb } from '#db/org-db.ts'
import { currentHardware, type HardwareRecord } from '#db/queries/hardware.ts'
import { findPreference, type Preference } from '#db/queries/preference.ts'
import { addDays, weekdayOf } from '#lib/core/time/civil.ts'
import { dayContext } from '#lib/evaluation/day-context.ts'
import { siteOf } from '#lib/evaluation/load-inputs.server.ts'
import type { DayContext, PriceTable, Site } from '#lib/evaluation/types.ts'
import { durationOf, unitDayOf } from '#lib/evaluation/unit-day.ts'
import { openTenancy, type TenancyChoice } from '#lib/tip/own-tenancy.server.ts'
import type { Heater } from './answers.ts'
import { type FormMode, formOf } from './form-fields.ts'
import type { Week } from './week.ts'

export async function loadShowers(db: OrgDb, { tenancyId, mode, nowMs }: TenancyChoice & { readonly mode: FormMode | null }) {
  const { tenancy, unit, property, today } = await openTenancy(db, { tenancyId, nowMs })
  const preference = await findPreference(db, tenancy.id)
  const record = await currentHardware(db, unit.id)
  const site = await siteOf(db, property)
  return {
    tenancyId: tenancy.id,
    unitCode: unit.code,
    form: formOf(preference ? weekFrom(preference.week) : null, mode),
    heater: record && heaterOf({ site, record, today, currency: property.currency, willing: preference?.willing ?? [] }),
  }
}

export const weekFrom = (week: Preference['week']): Week => week.map((showers) => [...showers])

interface HeaterCase {
  readonly site: Site
  readonly record: HardwareRecord
  readonly today: string
  readonly currency: string
  readonly willing: Preference['willing']
}

function heaterOf({ site, record, today, currency, willing }: HeaterCase): Heater {
  const hardware = { recordId: record.id, installation: record.installation, measured: record.measured, recordedAtMs: record.recordedAtMs }
  const duration = durationOf(hardware)
  const on = (context: DayContext) => unitDayOf({ site, context, hardware, duration, week: [], willing })
  const tables = new Map<string, { readonly index: number; readonly table: PriceTable }>()
  const indexOf = (table: PriceTable | null): number | null => {
    if (!table) return null
    const key = JSON.stringify(table)
    const known = tables.get(key) ?? { index: tables.size, table }
    tables.set(key, known)
    return known.index
  }
  const days = comingWeek(site, today).map((context) => ({ runs: on(context).runs, table: indexOf(context.prices) }))
  // Cold water of tomorrow for all days: within a week it moves a start-by by a minute, and one answer a group is clearer.
  const { tank, supplyVoltageV, inletC, willing: hours, start } = on(dayContext(site, addDays(today, 1)))
  return {
    unit: { tank, supplyVoltageV, inletC, willing: hours, start },
    days,
    tables: [...tables.values()].map(({ table }) => table),
    currency,
  }
}

/** The next seven days, Monday first; a day on which clocks change gives way to the same weekday a week on. */
function comingWeek(site: Site, today: string): readonly DayContext[] {
  const contexts = Array.from({ length: 7 }, (_, index) => {
    const context = dayContext(site, addDays(today, index + 1))
    return context.clockChange ? dayContext(site, addDays(today, index + 8)) : context
  })
  return contexts.sort((one, other) => weekdayOf(one.day) - weekdayOf(other.day))
}
