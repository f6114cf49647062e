/** What is on record about a property's units, by code; five statements whatever their number. */
import type { OrgDb } from '#db/org-db.ts'
import { listCurrentHardware } from '#db/queries/hardware.ts'
import { currentPreferences } from '#db/queries/preference.ts'
import type { Property } from '#db/queries/property.ts'
import { listTenanciesEver, tenanciesByUnit } from '#db/queries/tenancy.ts'
import { listUnits } from '#db/queries/unit.ts'
import type { KnownUnit } from './read-roster.ts'

export async function loadKnown(db: OrgDb, property: Property): Promise<ReadonlyMap<string, KnownUnit>> {
  const hardware = await listCurrentHardware(db, property.id)
  const tenancies = tenanciesByUnit(await listTenanciesEver(db, property.id))
  const preferences = await currentPreferences(db, property.id)
  return new Map(
    (await listUnits(db, property.id)).map(({ id, code, floor, stack }) => [
      code,
      { unitId: id, floor, stack, installation: hardware.get(id)?.installation ?? null, tenancies: tenancies.get(id) ?? [], preferences },
    ]),
  )
}
