/** Reads what an evaluation needs: a whole property in eight statements whatever its size, or one unit alone. */
import type { TenancyId, UnitId } from '#db/ids.ts'
import type { OrgDb } from '#db/org-db.ts'
import { type AnsweredDay, listAnsweredDays } from '#db/queries/feedback.ts'
import { currentHardware, type HardwareRecord, listCurrentHardware } from '#db/queries/hardware.ts'
import { listStandingStarts, type PlanStart } from '#db/queries/plan.ts'
import { currentPreferences, findPreference, type Preference } from '#db/queries/preference.ts'
import type { Property } from '#db/queries/property.ts'
import { findTariff } from '#db/queries/tariff.ts'
import { listTenancies, listTenanciesBetween, tenancyCovers, type Tenancy } from '#db/queries/tenancy.ts'
import { listUnits, type Unit } from '#db/queries/unit.ts'
import { addDays, civilOf } from '#lib/core/time/civil.ts'
import type { Day } from '#lib/core/time/types.ts'
import { MS_PER_MIN } from '#lib/core/units.ts'
import { dayContext } from './day-context.ts'
import { DISAGREEMENT } from './disagreement.ts'
import type { DayContext, Site, UnitHardware, Wants } from './types.ts'

/** Today and the seven local days after it. */
export const HORIZON_DAYS = 8

export interface UnitInputs {
  readonly unit: Unit
  readonly hardware: UnitHardware | null
  /** In step with the contexts. */
  readonly wants: readonly Wants[]
  /** What whoever lives there today has said of days gone by, newest first. */
  readonly answers: readonly AnsweredDay[]
}
export interface PropertyInputs {
  readonly property: Property
  readonly site: Site
  readonly contexts: readonly DayContext[]
  readonly fromDay: Day
  /** Exclusive. */
  readonly toDay: Day
  readonly units: readonly UnitInputs[]
}

export async function siteOf(db: OrgDb, property: Property): Promise<Site> {
  const { zone, supplyVoltageV, phases, serviceRatingA, baseLoadW, climate, ruleProfile, hygienePolicy, tariffId } = property
  const tariff = tariffId ? await findTariff(db, tariffId) : null
  return {
    zone,
    supplyVoltageV,
    phases: phases === 3 ? 3 : 1,
    serviceRatingA,
    baseLoadW,
    climate,
    ruleProfile,
    hygienePolicy,
    tariff,
  }
}

interface Horizon {
  readonly property: Property
  readonly nowMs: number
  readonly days: number
}

async function horizon(db: OrgDb, { property, nowMs, days }: Horizon): Promise<Omit<PropertyInputs, 'units'>> {
  const site = await siteOf(db, property)
  const fromDay = civilOf(nowMs, property.zone).day
  const contexts = Array.from({ length: days }, (_, index) => dayContext(site, addDays(fromDay, index)))
  return { property, site, contexts, fromDay, toDay: addDays(fromDay, days) }
}

export async function propertyInputs(db: OrgDb, asked: Horizon): Promise<PropertyInputs> {
  const frame = await horizon(db, asked)
  const { id } = asked.property
  const units = await listUnits(db, id)
  const hardware = await listCurrentHardware(db, id)
  const tenancies = await listTenanciesBetween(db, id, { fromDay: frame.fromDay, toDay: frame.toDay })
  const preferences = await currentPreferences(db, id)
  const agreed = byTenancy(await listStandingStarts(db, id, frame))
  const answers = byTenancy(await listAnsweredDays(db, { propertyId: id }, addDays(frame.fromDay, -DISAGREEMENT.lookBackDays)))
  const byUnit = new Map<UnitId, Tenancy[]>()
  for (const tenancy of tenancies) byUnit.set(tenancy.unitId, [...(byUnit.get(tenancy.unitId) ?? []), tenancy])
  return {
    ...frame,
    units: units.map((unit) => ({
      unit,
      hardware: toHardware(hardware.get(unit.id) ?? null),
      wants: frame.contexts.map((context) => wantsOn(context, { tenancies: byUnit.get(unit.id) ?? [], preferences, agreed })),
      answers: answersOf(livingOn(frame.fromDay, byUnit.get(unit.id) ?? []), answers),
    })),
  }
}

export async function unitInputs(db: OrgDb, asked: Horizon, unit: Unit): Promise<PropertyInputs> {
  const frame = await horizon(db, asked)
  const hardware = toHardware(await currentHardware(db, unit.id))
  const tenancies = await listTenancies(db, unit.id)
  const preferences = new Map<TenancyId, Preference>()
  for (const tenancy of tenancies) {
    const preference = await findPreference(db, tenancy.id)
    if (preference) preferences.set(tenancy.id, preference)
  }
  const agreed = byTenancy((await listStandingStarts(db, asked.property.id, frame)).filter((start) => start.unitId === unit.id))
  const wants = frame.contexts.map((context) => wantsOn(context, { tenancies, preferences, agreed }))
  const said = byTenancy(await listAnsweredDays(db, { unitId: unit.id }, addDays(frame.fromDay, -DISAGREEMENT.lookBackDays)))
  return { ...frame, units: [{ unit, hardware, wants, answers: answersOf(livingOn(frame.fromDay, tenancies), said) }] }
}

const toHardware = (record: HardwareRecord | null): UnitHardware | null =>
  record && { recordId: record.id, installation: record.installation, measured: record.measured, recordedAtMs: record.recordedAtMs }

const livingOn = (day: Day, tenancies: readonly Tenancy[]): Tenancy | null =>
  tenancies.find((tenancy) => tenancyCovers(tenancy, day)) ?? null

type ByTenancy<Row> = ReadonlyMap<TenancyId, readonly Row[]>

function byTenancy<Row extends { readonly tenancyId: TenancyId }>(rows: readonly Row[]): ByTenancy<Row> {
  const found = new Map<TenancyId, Row[]>()
  for (const row of rows) {
    const known = found.get(row.tenancyId)
    if (known) known.push(row)
    else found.set(row.tenancyId, [row])
  }
  return found
}

const answersOf = (tenancy: Tenancy | null, answers: ByTenancy<AnsweredDay>): readonly AnsweredDay[] =>
  (tenancy && answers.get(tenancy.id)) ?? []

interface Known {
  readonly tenancies: readonly Tenancy[]
  readonly preferences: ReadonlyMap<TenancyId, Preference>
  readonly agreed: ByTenancy<PlanStart>
}

function wantsOn({ day, startsAtMs }: DayContext, { tenancies, preferences, agreed }: Known): Wants {
  const tenancy = livingOn(day, tenancies)
  if (!tenancy) return { kind: 'nobody' }
  const preference = preferences.get(tenancy.id)
  if (!preference) return { kind: 'not-said' }
  const starts = (agreed.get(tenancy.id) ?? []).filter((start) => start.day === day)
  const elapsed = (instantMs: number) => (instantMs - startsAtMs) / MS_PER_MIN
  return {
    kind: 'week',
    week: preference.week,
    willing: preference.willing,
    ...(starts.length > 0
      ? { agreed: starts.map((start) => ({ readyByMin: elapsed(start.readyByAtMs), startMin: elapsed(start.startsAtMs) })) }
      : {}),
  }
}
