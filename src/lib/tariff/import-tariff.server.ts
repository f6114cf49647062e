/** Imports a URDB JSON record as a version of the property's tariff; what cannot be billed is refused with the field named. */
import type { PropertyId } from '#db/ids.ts'
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { addAudit } from '#db/queries/audit.ts'
import { changePropertyTariff, findProperty } from '#db/queries/property.ts'
import { addTariff, addTariffVersion, findStoredTariff } from '#db/queries/tariff.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { civilOf } from '#lib/core/time/civil.ts'
import { readUrdb } from '#lib/core/tariff/urdb-import.ts'
import { AppError, invalid, notFound } from '#lib/http/app-error.ts'
import { parseInput } from '#lib/http/parse.ts'
import { minorPerMajorOf } from './money.ts'
import { RATE_RECORD_BYTES, tariffImportSchema } from './schemas.ts'

export interface ImportTariff {
  readonly propertyId: PropertyId
  readonly input: unknown
  readonly nowMs: number
}

export async function importTariff(
  db: OrgDb,
  { propertyId, input, nowMs }: ImportTariff,
): Promise<{ readonly name: string; readonly warnings: readonly string[] }> {
  requireRole(db, ['landlord'], 'change tariffs')
  const { record: text, effectiveFrom } = parseInput(tariffImportSchema, input)
  if (Buffer.byteLength(text) > RATE_RECORD_BYTES) throw new AppError('too-large', 'The record is over 500 kB. Nothing was changed.')
  const record = parseJson(text)
  return inTransaction(db, async (trx) => {
    const property = await findProperty(trx, propertyId)
    if (!property) throw notFound('property')
    const minorPerMajor = minorPerMajorOf(property.currency)
    const outcome = readUrdb(record, { currency: property.currency, minorPerMajor, effectiveFrom: civilOf(nowMs, property.zone).day })
    if (outcome.status === 'refused')
      throw invalid(
        outcome.problems.map(({ field, message }) => ({ field: field || 'record', message: `${field || 'record'}: ${message}` })),
      )
    const version = { ...outcome.version, effectiveFrom: effectiveFrom || outcome.version.effectiveFrom }
    const tariffId = property.tariffId ?? (await addTariff(trx, { name: version.name, zone: property.zone, createdAtMs: nowMs }))
    const stored = await findStoredTariff(trx, tariffId)
    if (stored?.stored.some((one) => one.effectiveFrom === version.effectiveFrom)) {
      throw invalid([{ field: 'effectiveFrom', message: `There is a version from ${version.effectiveFrom} already. Choose another day.` }])
    }
    const source = `${version.utility}: ${version.name}`
    await addTariffVersion(trx, { tariffId, effectiveFrom: version.effectiveFrom, version, record, source, createdAtMs: nowMs })
    if (!property.tariffId) await changePropertyTariff(trx, propertyId, tariffId)
    await addAudit(trx, {
      atMs: nowMs,
      action: 'import',
      subjectKind: 'tariff',
      subjectId: tariffId,
      after: { source, effectiveFrom: version.effectiveFrom },
    })
    return { name: version.name, warnings: outcome.warnings }
  })
}

function parseJson(text: string): unknown {
  try {
    return JSON.parse(text) as unknown
  } catch {
    throw invalid([
      { field: 'record', message: 'This is not valid JSON. Export the rate as a JSON record and choose that file. Nothing was changed.' },
    ])
  }
}
