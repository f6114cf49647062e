/** Writes the roster of a property in the columns that the import reads. */
import type { OrgDb } from '#db/org-db.ts'
import { listCurrentHardware } from '#db/queries/hardware.ts'
import { currentPreferences } from '#db/queries/preference.ts'
import type { Property } from '#db/queries/property.ts'
import { listTenanciesOn } from '#db/queries/tenancy.ts'
import { listUnits } from '#db/queries/unit.ts'
import { requireRole } from '#lib/auth/permission.ts'
import type { Installation } from '#lib/core/hardware/types.ts'
import type { LossRating } from '#lib/core/tank/types.ts'
import { civilOf } from '#lib/core/time/civil.ts'
import { type ColumnName, COLUMNS, csvLine } from './columns.ts'
import { formatProgramme, formatShowers } from './programme-text.ts'

export async function exportRoster(db: OrgDb, property: Property, nowMs: number): Promise<string> {
  requireRole(db, ['landlord'], 'export the roster')
  const day = civilOf(nowMs, property.zone).day
  const hardware = await listCurrentHardware(db, property.id)
  const tenancies = new Map((await listTenanciesOn(db, property.id, day)).map((tenancy) => [tenancy.unitId, tenancy]))
  const preferences = await currentPreferences(db, property.id)
  const lines = (await listUnits(db, property.id)).map((unit) => {
    const tenancy = tenancies.get(unit.id)
    const week = tenancy && preferences.get(tenancy.id)?.week
    const installation = hardware.get(unit.id)?.installation
    const cells: Partial<Record<ColumnName, string>> = {
      unit: unit.code,
      floor: unit.floor === null ? '' : String(unit.floor),
      stack: unit.stack ?? '',
      ...(tenancy ? { tenant: tenancy.name, email: tenancy.email, from: tenancy.fromDay } : {}),
      ...(installation ? hardwareCells(installation) : {}),
      ...(week ? { showers: formatShowers(week.map((showers) => [...showers])) } : {}),
    }
    return csvLine(COLUMNS.map((column) => cells[column.name] ?? ''))
  })
  return csvLine(COLUMNS.map((column) => column.name)) + lines.join('')
}

function hardwareCells({ load, controller, circuit }: Installation): Partial<Record<ColumnName, string>> {
  const { tank } = load
  return {
    litres: String(tank.nominalVolumeL),
    lower_w: String(tank.lowerElement?.ratedPowerW ?? ''),
    upper_w: String(tank.upperElement?.ratedPowerW ?? ''),
    element_v: String((tank.lowerElement ?? tank.upperElement)?.ratedVoltageV ?? ''),
    set_point_c: String(tank.setPointC),
    mixing_valve_c: String(tank.mixingValveC ?? ''),
    loss: lossText(tank.loss),
    breaker_a: String(circuit.breakerA ?? ''),
    conductor: circuit.conductor ? `${circuit.conductor.size} ${circuit.conductor.system}` : '',
    contact_a: String(circuit.contactRatingA ?? ''),
    ...controllerCells(controller),
  }
}

function controllerCells(controller: Installation['controller']): Partial<Record<ColumnName, string>> {
  switch (controller.kind) {
    case 'dial':
      return { controller: 'dial', minutes: String(controller.settingMin) }
    case 'one-shot-fixed':
      return { controller: 'one-shot', minutes: String(controller.settingMin) }
    case 'one-shot-rc':
      return {
        controller: 'rc',
        r_megohm: String(Number((controller.resistanceOhm / 1e6).toPrecision(6))),
        c_microfarad: String(Number((controller.capacitanceF * 1e6).toPrecision(6))),
        timer_ic: controller.icFamily,
      }
    case 'time-switch':
      return { controller: 'switch', programme: formatProgramme(controller.programme) }
    case 'supplier-contactor':
      return { controller: 'supplier', programme: formatProgramme(controller.windows) }
  }
}

function lossText(loss: LossRating): string {
  switch (loss.kind) {
    case 'ua':
      return `${loss.lossWPerK} w/k`
    case 'uef':
      return `uef ${loss.uef}`
    case 'ef':
      return `ef ${loss.ef}`
    case 'class':
      return `class ${loss.label}`
    case 'kwh-per-day':
      return `${loss.lossKwhPerDay} kwh`
  }
}
