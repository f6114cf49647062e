/** Tells who lives in a unit, once a change, that its timer now runs otherwise; part of the transaction that changed it. */
import type { HardwareRecordId, UnitId } from '#db/ids.ts'
import type { OrgTrx } from '#db/org-db.ts'
import { findOrganisationSlug } from '#db/queries/address.ts'
import { findProperty } from '#db/queries/property.ts'
import { currentTenancy } from '#db/queries/tenancy.ts'
import { findUnit } from '#db/queries/unit.ts'
import { processConfig } from '#lib/config.server.ts'
import { describeController } from '#lib/core/controller/describe.ts'
import type { Controller } from '#lib/core/controller/types.ts'
import { civilOf } from '#lib/core/time/civil.ts'
import { formatInstant, zoneCity } from '#lib/format.ts'
import { letter } from '#lib/mail/letter.ts'
import { queueMessage } from '#lib/mail/queue-message.server.ts'
import { unsubscribeLink } from '#lib/mail/unsubscribe.server.ts'

export interface ScheduleChange {
  readonly unitId: UnitId
  /** The record that changes it; one letter for each. */
  readonly recordId: HardwareRecordId
  readonly before: Controller
  readonly after: Controller
  readonly nowMs: number
}

/** By then the evening tips have said it. */
const USEFUL_MS = 7 * 86_400_000

export async function tellTenant(trx: OrgTrx, { unitId, recordId, before, after, nowMs }: ScheduleChange): Promise<void> {
  // A value that was only written down more exactly changes nothing for whoever presses.
  const [was, is] = [describeController(before), describeController(after)]
  if (was === is) return
  const unit = await findUnit(trx, unitId)
  const property = unit && (await findProperty(trx, unit.propertyId))
  const tenancy = property && (await currentTenancy(trx, unitId, civilOf(nowMs, property.zone).day))
  if (!tenancy || tenancy.tips === 'never') return
  const slug = await findOrganisationSlug(trx, property.id)
  const unsubscribe = unsubscribeLink(trx.scope.organisationId, { tenancyId: tenancy.id }, nowMs)
  const { text, html } = letter({
    title: 'Your water heater’s timer was changed.',
    paragraphs: [
      `Until now: ${was}.`,
      `From now on: ${is}.`,
      'The time to start may be another one. Look at your card before your next shower; the next tip says it too.',
    ],
    actions: [{ label: 'Open your card', url: `${processConfig().baseUrl}/o/${slug}/my` }],
    footer: [
      `${unit.code}, ${property.name}, ${formatInstant(nowMs, property.zone, 'EEEE d MMMM yyyy, HH:mm')}; times are local (${zoneCity(property.zone)}).`,
      'Never bypass a thermostat or relief valve. If the water stays cold or the timer does not stop, call your landlord.',
      unsubscribe.footer,
    ],
  })
  await queueMessage(trx, {
    propertyId: property.id,
    unitId,
    tenancyId: tenancy.id,
    personId: tenancy.personId,
    toEmail: tenancy.email,
    kind: 'schedule-changed',
    cause: recordId,
    subject: `Look when to start from now on: the timer of ${unit.code} was changed`,
    text,
    html,
    headers: unsubscribe.headers,
    secrets: [unsubscribe.secret],
    nowMs,
    expiresAtMs: nowMs + USEFUL_MS,
  })
}
