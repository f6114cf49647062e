/** What happened in the demo's last two weeks: a unit that was mended, a visit that waits, tenants who said hot or cold. */
import type { PersonId } from '#db/ids.ts'
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { putFeedback } from '#db/queries/feedback.ts'
import { listOpenFlags } from '#db/queries/flag.ts'
import type { Connection } from '#db/queries/account.ts'
import { openOrganisation } from '#lib/auth/scope.server.ts'
import { addDays, civilOf } from '#lib/core/time/civil.ts'
import { assignVisit } from '#lib/visit/assign-visit.server.ts'
import { signOffVisit } from '#lib/visit/sign-off-visit.server.ts'
import { DEMO_BUILDINGS } from './buildings.ts'
import { american, dial } from './installations.ts'
import { DEMO_ORGANISATION } from './people.ts'
import type { MadeBuilding } from './write-building.server.ts'

const DAY_MS = 86_400_000

export interface HistoryCase {
  readonly connection: Connection
  readonly landlord: OrgDb
  readonly electricianId: PersonId
  readonly made: ReadonlyMap<string, MadeBuilding>
  readonly nowMs: number
}

export async function writeHistory(history: HistoryCase): Promise<void> {
  await mendUnit(history, { building: 'kestrel-rise', code: '2F' })
  await sendVisit(history, { building: 'cinder-wharf', code: '4B', daysAgo: 2, note: 'Tenant works nights; ring before noon.' })
  await hearTenants(history)
}

interface UnitPlace {
  readonly building: string
  readonly code: string
}

/** Found cold, visited, its dial set longer; the flag closed by itself. */
async function mendUnit(history: HistoryCase, place: UnitPlace): Promise<void> {
  const visitId = await sendVisit(history, { ...place, daysAgo: 12, note: 'Runs cold since the first frost.' })
  const electrician = await openOrganisation(history.connection, history.electricianId, DEMO_ORGANISATION.slug)
  if (!visitId || !electrician) return
  const input = {
    installation: american({ controller: dial(120), large: true }),
    reason: 'Dial set from 25 to 120 min; run timed',
    measuredMin: 118,
    expectedRevision: 1,
  }
  await signOffVisit(electrician.db, { visitId, input, organisationSlug: DEMO_ORGANISATION.slug, nowMs: history.nowMs - 10 * DAY_MS })
}

async function sendVisit(
  { landlord, electricianId, made, nowMs }: HistoryCase,
  visit: UnitPlace & { readonly daysAgo: number; readonly note: string },
) {
  const unitId = made.get(visit.building)?.units.get(visit.code)?.unitId
  if (!unitId) return null
  const flags = await listOpenFlags(landlord, { unitId })
  if (flags.length === 0) return null
  const zone = DEMO_BUILDINGS.find((building) => building.slug === visit.building)?.zone ?? 'UTC'
  const atMs = nowMs - visit.daysAgo * DAY_MS
  const input = {
    unitId,
    flagIds: flags.map((flag) => flag.id),
    electricianId,
    dueDay: addDays(civilOf(atMs, zone).day, 4),
    note: visit.note,
  }
  return assignVisit(landlord, { input, organisationSlug: DEMO_ORGANISATION.slug, nowMs: atMs })
}

/** Said to be cold; of these the model calls Cinder Wharf 6A ready, so that it is asked what is wrong with the model. */
const COLD_UNITS = new Set(['cinder-wharf 5C', 'cinder-wharf 2A', 'cinder-wharf 6A', 'sallow-court Flat 5'])

async function hearTenants({ landlord, made, nowMs }: HistoryCase): Promise<void> {
  for (const [slug, building] of made) {
    const zone = DEMO_BUILDINGS.find((one) => one.slug === slug)?.zone ?? 'UTC'
    await inTransaction(landlord, async (trx) => {
      let index = 0
      for (const [code, { tenancyId }] of building.units) {
        index++
        const cold = COLD_UNITS.has(`${slug} ${code}`)
        if (!tenancyId || (index % 4 !== 1 && !cold)) continue
        for (const daysAgo of [9, 6, 3, 1]) {
          const atMs = nowMs - daysAgo * DAY_MS
          await putFeedback(trx, { tenancyId, day: civilOf(atMs, zone).day, verdict: cold ? 'cold' : 'hot' }, atMs)
        }
      }
    })
  }
}
