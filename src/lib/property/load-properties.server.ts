/** The organisation's first page: every property with tomorrow in one sentence. */
import type { OrgDb } from '#db/org-db.ts'
import { listEvaluations } from '#db/queries/evaluation.ts'
import { listOpenFlags } from '#db/queries/flag.ts'
import { listProperties } from '#db/queries/property.ts'
import { listUnits } from '#db/queries/unit.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { addDays, civilOf } from '#lib/core/time/civil.ts'
import { counted } from '#lib/format.ts'

export interface PropertyLine {
  readonly slug: string
  readonly name: string
  readonly address: string
  readonly units: number
  readonly sentence: string
  readonly dangerous: number
}

export async function loadProperties(db: OrgDb, nowMs: number): Promise<readonly PropertyLine[]> {
  requireRole(db, ['landlord'], 'see all properties')
  const lines: PropertyLine[] = []
  for (const property of await listProperties(db)) {
    const tomorrow = addDays(civilOf(nowMs, property.zone).day, 1)
    const units = await listUnits(db, property.id)
    const evaluations = await listEvaluations(db, property.id, tomorrow, addDays(tomorrow, 1))
    const flags = await listOpenFlags(db, { propertyId: property.id })
    const needing = evaluations.filter((one) => one.status !== 'no-need' && one.status !== 'unknown')
    const warm = needing.filter((one) => one.status === 'ready').length
    lines.push({
      slug: property.slug,
      name: property.name,
      address: property.address,
      units: units.length,
      dangerous: flags.filter((flag) => flag.severity === 'dangerous').length,
      sentence:
        units.length === 0
          ? 'No units yet: import the roster.'
          : needing.length === 0
            ? 'Not evaluated yet: the nightly job runs at 01:30, or press “Evaluate now” on its page.'
            : `Tomorrow ${warm} of ${counted(needing.length, 'unit')} will be warm on time.`,
    })
  }
  return lines
}
