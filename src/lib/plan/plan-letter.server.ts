/** Tells a tenancy, once a plan, when to press from now on; and once more when it was undone. Part of the transaction that changed it. */
import type { PlanId } from '#db/ids.ts'
import type { OrgTrx } from '#db/org-db.ts'
import type { PlanStart } from '#db/queries/plan.ts'
import type { Property } from '#db/queries/property.ts'
import type { Tenancy } from '#db/queries/tenancy.ts'
import { processConfig } from '#lib/config.server.ts'
import { formatDay, formatInstant, zoneCity } from '#lib/format.ts'
import { letter } from '#lib/mail/letter.ts'
import { queueMessage } from '#lib/mail/queue-message.server.ts'
import { unsubscribeLink } from '#lib/mail/unsubscribe.server.ts'
import type { Landlord } from '#lib/tip/whom-to-call.server.ts'

export const acceptedCause = (planId: PlanId): string => `plan ${planId}`
const undoneCause = (planId: PlanId): string => `plan undone ${planId}`

export interface PlanLetter {
  readonly property: Property
  readonly slug: string
  readonly landlords: readonly Landlord[]
  readonly planId: PlanId
  readonly tenancy: Tenancy
  readonly unitCode: string
  /** Of this tenancy, in order of time; at least one. */
  readonly starts: readonly PlanStart[]
  readonly nowMs: number
}

const clock = (instantMs: number, { property }: Pick<PlanLetter, 'property'>): string => formatInstant(instantMs, property.zone, 'HH:mm')

/** The evening before is named: a start just before midnight is easily taken for the other night. */
function startWords(startsAtMs: number, day: string, told: Pick<PlanLetter, 'property'>): string {
  const isEve = formatInstant(startsAtMs, told.property.zone, 'yyyy-MM-dd') < day
  return `${clock(startsAtMs, told)}${isEve ? ' the evening before' : ''}`
}

export function queueAccepted(trx: OrgTrx, told: PlanLetter): Promise<unknown> {
  const [first, ...more] = told.starts
  if (!first) throw new RangeError('a letter about a plan names a start')
  const one = `Press the timer at ${startWords(first.startsAtMs, first.day, told)} on ${formatDay(first.day)}`
  return queue(trx, told, {
    cause: acceptedCause(told.planId),
    subject: more.length === 0 ? one : `New times to press the timer, from ${formatDay(first.day)} on`,
    title: more.length === 0 ? `${one}.` : 'New times to press the timer.',
    paragraphs: [
      'The heaters of the house take turns, so that the building’s supply is not overloaded and dear hours are avoided. Your water will be as warm as before.',
      'If you cannot press then, press when you can: hot water is never withheld. If an hour does not suit you at all, change your hours.',
    ],
    figures: told.starts.map((start) => [
      formatDay(start.day),
      `press at ${startWords(start.startsAtMs, start.day, told)}, not ${startWords(start.beforeAtMs, start.day, told)}`,
    ]),
    usefulUntilMs: Math.max(...told.starts.map(({ startsAtMs }) => startsAtMs)),
  })
}

export function queueUndone(trx: OrgTrx, told: PlanLetter): Promise<unknown> {
  const [first, ...more] = told.starts
  if (!first) throw new RangeError('a letter about a plan names a start')
  const one = `As before: press the timer at ${startWords(first.beforeAtMs, first.day, told)} on ${formatDay(first.day)}`
  return queue(trx, told, {
    cause: undoneCause(told.planId),
    subject: more.length === 0 ? one : `As before: the new times to press the timer are withdrawn`,
    title: more.length === 0 ? `${one}.` : 'The new times to press the timer are withdrawn.',
    paragraphs: ['You were told other times in an earlier letter. They no longer hold; these do, as before.'],
    figures: told.starts.map((start) => [
      formatDay(start.day),
      `press at ${startWords(start.beforeAtMs, start.day, told)}, not ${startWords(start.startsAtMs, start.day, told)}`,
    ]),
    usefulUntilMs: Math.max(...told.starts.map(({ startsAtMs, beforeAtMs }) => Math.max(startsAtMs, beforeAtMs))),
  })
}

interface Words {
  readonly cause: string
  readonly subject: string
  readonly title: string
  readonly paragraphs: readonly string[]
  readonly figures: readonly (readonly [string, string])[]
  readonly usefulUntilMs: number
}

async function queue(trx: OrgTrx, told: PlanLetter, words: Words): Promise<unknown> {
  const { property, slug, landlords, tenancy, unitCode, nowMs } = told
  const unsubscribe = unsubscribeLink(trx.scope.organisationId, { tenancyId: tenancy.id }, nowMs)
  const call = landlords.map(({ name, email }) => `${name} (${email})`).join(' or ') || 'your landlord'
  const { baseUrl } = processConfig()
  const { text, html } = letter({
    title: words.title,
    paragraphs: words.paragraphs,
    figures: words.figures,
    actions: [
      { label: 'Open your card', url: `${baseUrl}/o/${slug}/my` },
      { label: 'Change your hours', url: `${baseUrl}/o/${slug}/my/showers` },
    ],
    footer: [
      `${unitCode}, ${property.name}, ${formatInstant(nowMs, property.zone, 'EEEE d MMMM yyyy, HH:mm')}; times are local (${zoneCity(property.zone)}).`,
      `Cold water, a smell or a timer that does not stop: call ${call}. Never bypass a thermostat or relief valve.`,
      unsubscribe.footer,
    ],
  })
  return queueMessage(trx, {
    propertyId: property.id,
    unitId: tenancy.unitId,
    tenancyId: tenancy.id,
    personId: tenancy.personId,
    toEmail: tenancy.email,
    kind: 'schedule-changed',
    cause: words.cause,
    subject: words.subject,
    text,
    html,
    headers: unsubscribe.headers,
    secrets: [unsubscribe.secret],
    nowMs,
    expiresAtMs: words.usefulUntilMs,
  })
}
