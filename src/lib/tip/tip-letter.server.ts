/** A tip as a letter: subject that says what to do, the day strip inline, hot and cold links, one-click unsubscribe (RFC 8058); true until its day begins. */
import type { OrganisationId } from '#db/ids.ts'
import { dayBounds } from '#lib/core/time/civil.ts'
import { formatDay, zoneCity } from '#lib/format.ts'
import { letter } from '#lib/mail/letter.ts'
import { signedLink, unsubscribeLink } from '#lib/mail/unsubscribe.server.ts'
import { dayStripPng } from '#lib/strip/day-strip-png.server.ts'
import { stripDayOf } from '#lib/unit/strip-day.ts'
import { cautionsFor, isPressed } from './cautions.ts'
import { type TipFor, tomorrowWords } from './send-tips.server.ts'
import { tipOf } from './tip.ts'
import { weekLines } from './week-lines.ts'

const STRIP_PX = 480
const FEEDBACK_DAYS = 7
const DAY_MS = 86_400_000

export async function tipLetter(tipFor: TipFor, organisationId: OrganisationId) {
  const { property, landlords, evaluation, later, record, flags, unitCode } = tipFor
  const { installation } = record
  const pressed = isPressed(installation)
  const tip = tipOf({ evaluation, pressed, when: tomorrowWords(evaluation.day) })
  const links = linksOf(tipFor, organisationId)
  const strip = await dayStripPng(stripDayOf(evaluation), STRIP_PX)
  const call = landlords.map(({ name, email }) => `${name} (${email})`).join(' or ') || 'your landlord'
  const { text, html } = letter({
    title: tip.figure && pressed ? `Press the timer ${tip.agreed ? 'at' : 'by'} ${tip.figure}.` : tip.subject,
    paragraphs: [
      ...(pressed ? [] : [tip.action]),
      ...tip.lines,
      ...(tip.behind ? [tip.behind] : []),
      ...weekLines(later, pressed),
      ...cautionsFor({ installation, flags }).map((caution) => caution.text),
    ],
    image: { contentId: 'day-strip', alt: strip.sentence, widthPx: STRIP_PX },
    actions: [
      { label: 'It was hot', url: links.hot.url },
      { label: 'It was cold', url: links.cold.url },
    ],
    footer: [
      `${unitCode}, ${property.name}, ${formatDay(evaluation.day, 'EEEE d MMMM yyyy')}; times are local (${zoneCity(property.zone)}).`,
      `Cold water, a smell or a timer that does not stop: call ${call}. Never bypass a thermostat or relief valve.`,
      links.unsubscribe.footer,
    ],
  })
  return {
    subject: tip.subject,
    text,
    html,
    headers: links.unsubscribe.headers,
    secrets: [links.hot.secret, links.cold.secret, links.unsubscribe.secret],
    // Its words say "tomorrow": from the first moment of that day they would be false.
    expiresAtMs: dayBounds(evaluation.day, property.zone).startsAtMs,
    attachments: [{ contentId: 'day-strip', filename: 'day.png', contentType: 'image/png', base64: strip.base64 }],
  }
}

/** Each link is bound to one tenancy, one purpose and, where it speaks of a day, that day; each expires. */
function linksOf({ property, tenancy, evaluation, nowMs }: TipFor, organisationId: OrganisationId) {
  const { startsAtMs, endsAtMs } = dayBounds(evaluation.day, property.zone)
  const said = (verdict: 'hot' | 'cold') =>
    signedLink({
      purpose: 'feedback',
      expiresAtMs: endsAtMs + FEEDBACK_DAYS * DAY_MS,
      subject: { organisationId, tenancyId: tenancy.id, day: evaluation.day, verdict, opensAtMs: String(startsAtMs) },
    })
  return { hot: said('hot'), cold: said('cold'), unsubscribe: unsubscribeLink(organisationId, { tenancyId: tenancy.id }, nowMs) }
}
