/** A tip as a letter: subject that says what to do, the day strip inline, hot and cold links, one-click unsubscribe (RFC 8058). */
import type { OrganisationId } from '#db/ids.ts'
import { processConfig } from '#lib/config.server.ts'
import { dayBounds } from '#lib/core/time/civil.ts'
import { formatDay, zoneCity } from '#lib/format.ts'
import { letter } from '#lib/mail/letter.ts'
import { signingSecret, signToken } from '#lib/mail/link.server.ts'
import { dayStripPng } from '#lib/strip/day-strip-png.server.ts'
import { stripDayOf } from '#lib/unit/strip-day.ts'
import { cautionsFor, isPressed } from './cautions.ts'
import { type TipFor, tomorrowWords } from './send-tips.server.ts'
import { tipOf } from './tip.ts'
import { weekLines } from './week-lines.ts'

const STRIP_PX = 480
const FEEDBACK_DAYS = 7
const UNSUBSCRIBE_DAYS = 365
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
    title: tip.figure && pressed ? `Press the timer by ${tip.figure}.` : tip.subject,
    paragraphs: [
      ...(pressed ? [] : [tip.action]),
      ...tip.lines,
      ...(tip.behind ? [tip.behind] : []),
      ...weekLines(later, pressed),
      ...cautionsFor({ installation, flags }).map((caution) => caution.text),
    ],
    image: { contentId: 'day-strip', alt: strip.sentence, widthPx: STRIP_PX },
    actions: [
      { label: 'It was hot', url: links.hot },
      { label: 'It was cold', url: links.cold },
    ],
    footer: [
      `${unitCode}, ${property.name}, ${formatDay(evaluation.day, 'EEEE d MMMM yyyy')}; times are local (${zoneCity(property.zone)}).`,
      `Cold water, a smell or a timer that does not stop: call ${call}. Never bypass a thermostat or relief valve.`,
      `Stop these mails: ${links.unsubscribe}`,
    ],
  })
  return {
    subject: tip.subject,
    text,
    html,
    headers: { 'List-Unsubscribe': `<${links.unsubscribe}>`, 'List-Unsubscribe-Post': 'List-Unsubscribe=One-Click' },
    attachments: [{ contentId: 'day-strip', filename: 'day.png', contentType: 'image/png', base64: strip.base64 }],
  }
}

/** Each link is bound to one tenancy, one purpose and, where it speaks of a day, that day; each expires. */
function linksOf({ property, tenancy, evaluation, nowMs }: TipFor, organisationId: OrganisationId) {
  const { startsAtMs, endsAtMs } = dayBounds(evaluation.day, property.zone)
  const link = (purpose: string, expiresAtMs: number, more: Record<string, string>) => {
    const subject = { organisationId, tenancyId: tenancy.id, ...more }
    return `${processConfig().baseUrl}/t/${signToken({ purpose, expiresAtMs, subject }, signingSecret())}`
  }
  const said = (verdict: 'hot' | 'cold') =>
    link('feedback', endsAtMs + FEEDBACK_DAYS * DAY_MS, { day: evaluation.day, verdict, opensAtMs: String(startsAtMs) })
  return { hot: said('hot'), cold: said('cold'), unsubscribe: link('unsubscribe', nowMs + UNSUBSCRIBE_DAYS * DAY_MS, {}) }
}
