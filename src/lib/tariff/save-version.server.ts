/**
 * Saves a version that was written by hand. Nothing stored is changed: from a new day it is a version of its own, from a day that has
 * one it is that version's next edition, with the reason for the correction. Who has not seen the newest save is told what it changed.
 */
import type { PropertyId } from '#db/ids.ts'
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { addAudit } from '#db/queries/audit.ts'
import { changePropertyTariff, findProperty, type Property } from '#db/queries/property.ts'
import { addTariff, addTariffVersion, findStoredTariff, type StoredTariff, type StoredVersion } from '#db/queries/tariff.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { checkVersion } from '#lib/core/tariff/check-version.ts'
import type { TariffVersion } from '#lib/core/tariff/types.ts'
import { civilOf } from '#lib/core/time/civil.ts'
import { AppError, invalid, notFound } from '#lib/http/app-error.ts'
import { parseInput } from '#lib/http/parse.ts'
import { needsReason } from './correction.ts'
import { changesSince } from './differences.ts'
import { minorPerMajorOf } from './money.ts'
import { saveVersionSchema } from './version-schema.ts'

export interface SaveVersion {
  readonly propertyId: PropertyId
  readonly input: unknown
  readonly nowMs: number
}

export async function saveVersion(
  db: OrgDb,
  { propertyId, input, nowMs }: SaveVersion,
): Promise<{ readonly effectiveFrom: string; readonly revision: number }> {
  requireRole(db, ['landlord'], 'change tariffs')
  const { revision, reason, version: written } = parseInput(saveVersionSchema, input)
  return inTransaction(db, async (trx) => {
    const property = await findProperty(trx, propertyId)
    if (!property) throw notFound('property')
    const stored = property.tariffId ? await findStoredTariff(trx, property.tariffId) : null
    if (revision !== (stored?.revision ?? 0)) throw movedOn(stored, revision)
    const version: TariffVersion = { ...written, currency: property.currency, minorPerMajor: minorPerMajorOf(property.currency) }
    const problems = checkVersion(version)
    if (problems.length > 0) throw invalid(problems)
    const before = stored?.stored.find((one) => one.effectiveFrom === version.effectiveFrom) ?? null
    requireReason(version, { stored, reason, today: civilOf(nowMs, property.zone).day })
    const tariffId = stored?.id ?? (await newTariff(trx, { property, name: version.name, nowMs }))
    const edition = (before?.edition ?? 0) + 1
    const source = `${version.utility || 'Entered by hand'}: ${version.name}`
    const fields = { effectiveFrom: version.effectiveFrom, edition, reason: reason || null, source }
    await addTariffVersion(trx, { tariffId, ...fields, version, record: null, createdAtMs: nowMs })
    await addAudit(trx, { atMs: nowMs, action: before ? 'correct' : 'write', subjectKind: 'tariff', subjectId: tariffId, after: fields })
    return { effectiveFrom: version.effectiveFrom, revision: revision + 1 }
  })
}

/** The difference, line by line, so that nothing has to be guessed or entered again. */
function movedOn(stored: StoredTariff | null, seen: number): AppError {
  const all = [...(stored?.stored ?? []), ...(stored?.corrected ?? [])].sort(
    (one, other) => one.createdAtMs - other.createdAtMs || one.edition - other.edition,
  )
  const versionsOf = (some: readonly StoredVersion[]) => some.map((one) => one.version)
  const changes = changesSince(versionsOf(all.slice(0, seen)), versionsOf(all.slice(seen)))
  return new AppError('conflict', 'Somebody else saved this tariff after you opened it. Yours is not saved, and it is still here.', {
    fields: changes.map((message) => ({ field: 'revision', message })),
  })
}

function requireReason(
  version: TariffVersion,
  { stored, reason, today }: { readonly stored: StoredTariff | null; readonly reason: string; readonly today: string },
): void {
  if (reason === '' && needsReason(version.effectiveFrom, { days: stored?.tariff.versions.map((one) => one.effectiveFrom) ?? [], today }))
    throw invalid([
      { field: 'reason', message: 'This corrects what is recorded, or days that have passed. Say why: the reason is kept with it.' },
    ])
}

async function newTariff(
  trx: Parameters<typeof addTariff>[0],
  { property, name, nowMs }: { readonly property: Property; readonly name: string; readonly nowMs: number },
) {
  const tariffId = await addTariff(trx, { name, zone: property.zone, createdAtMs: nowMs })
  await changePropertyTariff(trx, property.id, tariffId)
  return tariffId
}
