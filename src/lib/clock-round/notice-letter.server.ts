/** The letter before a clock change: when it is, which switches to set by when, whose supplier to ask. */
import type { UnitId } from '#db/ids.ts'
import type { Property } from '#db/queries/property.ts'
import { processConfig } from '#lib/config.server.ts'
import { MAINS_CAUTION } from '#lib/core/hardware/verdict.ts'
import { counted, formatDay } from '#lib/format.ts'
import { letter } from '#lib/mail/letter.ts'
import type { Unsubscribe } from '#lib/mail/unsubscribe.server.ts'
import type { Round } from './round.ts'
import { changeDay, changeWords, offWords } from './view.ts'

export interface NoticeCase {
  readonly property: Pick<Property, 'slug' | 'name' | 'zone'>
  readonly slug: string | null
  readonly round: Round
  readonly isPlanned: (unitId: UnitId) => boolean
  readonly unsubscribe: Unsubscribe
}

export function noticeLetter({ property, slug, round, isPlanned, unsubscribe }: NoticeCase) {
  const house = `${processConfig().baseUrl}/o/${slug}/p/${property.slug}`
  const day = formatDay(changeDay(round.change, property.zone), 'EEEE d MMMM')
  const toSet = counted(round.visits.length, 'time switch', 'time switches')
  const unitUrl = (code: string) => `${house}/units/${encodeURIComponent(code)}`
  const { text, html } = letter({
    title: `The clocks change on ${day}.`,
    paragraphs: [
      `${property.name}, ${changeWords(round.change, property.zone)} (${property.zone}).`,
      round.visits.length > 0
        ? `${toSet} ${round.visits.length === 1 ? 'does' : 'do'} not follow and ${round.visits.length === 1 ? 'runs' : 'run'} off after it until somebody sets ${round.visits.length === 1 ? 'it' : 'them'}.`
        : 'No time switch of yours has to be set.',
    ],
    lists: [
      {
        heading: 'To set',
        items: round.visits.map(({ unit, aheadMin, dueDay }) => ({
          text: `${unit.code}, by ${formatDay(dueDay)}: unset it runs ${offWords(aheadMin)}${isPlanned(unit.unitId) ? '; a visit is planned' : ''}`,
          url: unitUrl(unit.code),
        })),
      },
      {
        heading: 'Switched by the supplier: ask them whether it follows',
        items: round.askSupplier.map(({ code }) => ({ text: code, url: unitUrl(code) })),
      },
    ].filter(({ items }) => items.length > 0),
    actions: [{ label: 'Plan the round', url: `${house}/clock-change` }],
    footer: [MAINS_CAUTION, 'You get this once before each clock change, because you run this building.', unsubscribe.footer],
  })
  return {
    subject:
      round.visits.length > 0
        ? `Have ${toSet} set at ${property.name}: the clocks change on ${day}`
        : `Ask the supplier at ${property.name}: the clocks change on ${day}`,
    text,
    html,
    headers: unsubscribe.headers,
    secrets: [unsubscribe.secret],
  }
}
