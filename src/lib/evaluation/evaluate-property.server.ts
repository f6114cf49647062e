/**
 * Evaluates every unit of a property for today and the days after it. Safe to run twice: rows of a unit and day are replaced.
 * Needs no role: it only recomputes what is on record, for the job that calls it or for whoever may change a record.
 */
import type { PropertyId } from '#db/ids.ts'
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { listOpenFlags, listStandingDismissals } from '#db/queries/flag.ts'
import { findProperty } from '#db/queries/property.ts'
import { notFound } from '#lib/http/app-error.ts'
import { log, loggedError } from '#lib/log.server.ts'
import { cachedAssess } from './assessment-cache.ts'
import { checkService } from './check-service.server.ts'
import { evaluateUnits, type UnitResult } from './evaluate-units.server.ts'
import { HORIZON_DAYS, type PropertyInputs, propertyInputs } from './load-inputs.server.ts'
import { addChanges, type FlagChanges } from './reconcile-flags.server.ts'
import { writeResults } from './write-results.server.ts'

export interface EvaluationCounts {
  readonly units: number
  readonly evaluated: number
  readonly failed: number
  /** Units with at least one day on which a need is not met. */
  readonly cold: number
  readonly flagsOpened: number
  readonly flagsRefreshed: number
  readonly flagsClosed: number
}

/** A transaction holds the one connection; this many units take about 50 ms to write. */
const UNITS_A_TRANSACTION = 50

export async function evaluateProperty(
  db: OrgDb,
  { propertyId, nowMs, days = HORIZON_DAYS }: { readonly propertyId: PropertyId; readonly nowMs: number; readonly days?: number },
): Promise<EvaluationCounts> {
  const property = await findProperty(db, propertyId)
  if (!property) throw notFound('property')
  return evaluateInputs(db, await propertyInputs(db, { property, nowMs, days }), nowMs)
}

/** Some or all units of a property: each through the model, written in batches, the building's load after them. */
export async function evaluateInputs(db: OrgDb, inputs: PropertyInputs, nowMs: number): Promise<EvaluationCounts> {
  let counts = { units: inputs.units.length, evaluated: 0, failed: 0, cold: 0 }
  let changes: FlagChanges = { opened: 0, refreshed: 0, closed: 0 }
  let batch: UnitResult[] = []
  const write = async () => {
    for (const written of await writeWhole(db, { inputs, results: batch, nowMs })) {
      for (const result of written.results) counts = counted(counts, result)
      changes = addChanges(changes, written.changes)
    }
    batch = []
  }
  for await (const result of evaluateUnits(inputs, cachedAssess())) {
    batch.push(result)
    if (batch.length === UNITS_A_TRANSACTION) await write()
  }
  await write()
  changes = addChanges(changes, await inTransaction(db, (trx) => checkService(trx, inputs, nowMs)))
  return { ...counts, flagsOpened: changes.opened, flagsRefreshed: changes.refreshed, flagsClosed: changes.closed }
}

interface Batch {
  readonly inputs: PropertyInputs
  readonly results: readonly UnitResult[]
  readonly nowMs: number
}

interface Written {
  readonly results: readonly UnitResult[]
  readonly changes: FlagChanges
}

/** A batch in one transaction; where that fails, unit by unit, so that the one whose figures cannot be kept stops no other. */
async function writeWhole(db: OrgDb, batch: Batch): Promise<readonly Written[]> {
  try {
    return [{ results: batch.results, changes: await writeBatch(db, batch) }]
  } catch (error) {
    const [only, ...others] = batch.results
    if (!only) throw error
    if (others.length > 0) {
      const written: Written[] = []
      for (const result of batch.results) written.push(...(await writeWhole(db, { ...batch, results: [result] })))
      return written
    }
    // That it failed can be kept, or the database itself is at fault.
    const results: readonly UnitResult[] = [{ status: 'failed', inputs: only.inputs, error }]
    return [{ results, changes: await writeBatch(db, { ...batch, results }) }]
  }
}

/** Flags are read inside the transaction: one that was dismissed while the model ran stays dismissed. */
export const writeBatch = (db: OrgDb, { inputs, results, nowMs }: Batch): Promise<FlagChanges> =>
  inTransaction(db, async (trx) => {
    const unitIds = new Set<string | null>(results.map((result) => result.inputs.unit.id))
    const openFlags = (await listOpenFlags(trx, { propertyId: inputs.property.id })).filter((flag) => unitIds.has(flag.unitId))
    const dismissals = await listStandingDismissals(trx, inputs.property.id, inputs.fromDay)
    return writeResults(trx, { inputs, results, openFlags, dismissals, nowMs })
  })

type Counts = Pick<EvaluationCounts, 'units' | 'evaluated' | 'failed' | 'cold'>

function counted(counts: Counts, result: UnitResult): Counts {
  if (result.status === 'failed') {
    logFailure(result)
    return { ...counts, failed: counts.failed + 1 }
  }
  const cold = result.findings.some((finding) => finding.kind === 'misses-recovery')
  return { ...counts, evaluated: counts.evaluated + 1, cold: counts.cold + (cold ? 1 : 0) }
}

export const logFailure = ({ inputs, error }: Extract<UnitResult, { status: 'failed' }>): void =>
  log.error({ unitId: inputs.unit.id, err: loggedError(error) }, 'unit could not be evaluated')
