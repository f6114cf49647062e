/** A tip as a letter: subject that says what to do, the day strip inline, hot and cold links, one-click unsubscribe (RFC 8058). */
import type { OrganisationId } from '#db/ids.ts'
import { processConfig } from '#lib/config.server.ts'
import { assessScald } from '#lib/core/hygiene/scald.ts'
import { dayBounds } from '#lib/core/time/civil.ts'
import { formatDay, zoneCity } from '#lib/format.ts'
import { letter } from '#lib/mail/letter.ts'
import { signingSecret, signToken } from '#lib/mail/link.server.ts'
import { dayStripPng } from '#lib/strip/day-strip-png.server.ts'
import { stripDayOf } from '#lib/unit/strip-day.ts'
import type { TipFor } from './send-tips.server.ts'
import { tipOf } from './tip.ts'

const STRIP_PX = 480
const FEEDBACK_DAYS = 7
const UNSUBSCRIBE_DAYS = 365
const DAY_MS = 86_400_000

export async function tipLetter({ property, tenancy, evaluation, record, unitCode, nowMs }: TipFor, organisationId: OrganisationId) {
  const { installation } = record
  const pressed = installation.controller.kind !== 'time-switch' && installation.controller.kind !== 'supplier-contactor'
  const tip = tipOf({ evaluation, pressed, when: `tomorrow, ${formatDay(evaluation.day, 'EEEE')}` })
  const { setPointC, mixingValveC } = installation.load.tank
  const scald = assessScald(setPointC, mixingValveC)
  const { baseUrl } = processConfig()
  const subject = { organisationId, tenancyId: tenancy.id }
  const dayEndMs = dayBounds(evaluation.day, property.zone).endsAtMs
  const link = (purpose: string, expiresAtMs: number, more: Record<string, string>) =>
    `${baseUrl}/t/${signToken({ purpose, expiresAtMs, subject: { ...subject, ...more } }, signingSecret())}`
  const said = (verdict: 'hot' | 'cold') => link('feedback', dayEndMs + FEEDBACK_DAYS * DAY_MS, { day: evaluation.day, verdict })
  const unsubscribe = link('unsubscribe', nowMs + UNSUBSCRIBE_DAYS * DAY_MS, {})
  const strip = await dayStripPng(stripDayOf(evaluation), STRIP_PX)
  const { text, html } = letter({
    title: tip.figure && pressed ? `Press the timer by ${tip.figure}.` : tip.subject,
    paragraphs: [
      ...tip.lines,
      ...(scald.atRisk && scald.secondsToBurn !== null
        ? [`Water from this tank is ${setPointC} °C at the tap and burns skin in ${scald.secondsToBurn} s. Mix before children use it.`]
        : []),
    ],
    image: { contentId: 'day-strip', alt: strip.sentence, widthPx: STRIP_PX },
    actions: [
      { label: 'It was hot', url: said('hot') },
      { label: 'It was cold', url: said('cold') },
    ],
    footer: [
      `${unitCode}, ${property.name}, ${formatDay(evaluation.day, 'EEEE d MMMM yyyy')}; times are local (${zoneCity(property.zone)}).`,
      'Cold water, a smell or a timer that does not stop: call your landlord. Never bypass a thermostat or relief valve.',
      `Stop these mails: ${unsubscribe}`,
    ],
  })
  return {
    subject: tip.subject,
    text,
    html,
    headers: { 'List-Unsubscribe': `<${unsubscribe}>`, 'List-Unsubscribe-Post': 'List-Unsubscribe=One-Click' },
    attachments: [{ contentId: 'day-strip', filename: 'day.png', contentType: 'image/png', base64: strip.base64 }],
  }
}
