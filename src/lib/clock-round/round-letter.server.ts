/** The letter that sends an electrician on a round: every unit, by when, what to do, with the cautions. */
import type { VisitId } from '#db/ids.ts'
import type { Property } from '#db/queries/property.ts'
import { processConfig } from '#lib/config.server.ts'
import { MAINS_CAUTION } from '#lib/core/hardware/verdict.ts'
import { counted, formatDay } from '#lib/format.ts'
import { letter } from '#lib/mail/letter.ts'
import type { Round, RoundVisit } from './round.ts'
import { changeWords, offWords } from './view.ts'

export interface PlannedVisit {
  readonly visit: RoundVisit
  readonly visitId: VisitId
}

interface RoundCase {
  readonly property: Property
  readonly round: Round
  readonly planned: readonly PlannedVisit[]
  readonly organisationSlug: string
}

export function roundLetter({ property, round, planned, organisationSlug }: RoundCase): {
  readonly subject: string
  readonly text: string
  readonly html: string
} {
  const { text, html } = letter({
    title: `${counted(planned.length, 'time switch', 'time switches')} to set at ${property.name}`,
    paragraphs: [
      `The clocks change on ${changeWords(round.change, property.zone)} (${property.zone}). These switches do not follow.`,
      ...planned.map(({ visit }) => `${visit.unit.code}, by ${formatDay(visit.dueDay)}: unset it runs ${offWords(visit.aheadMin)}.`),
      'Each visit says how to set it and what to record.',
      property.address,
    ],
    actions: [{ label: 'Open your visits', url: `${processConfig().baseUrl}/o/${organisationSlug}/visits` }],
    footer: [MAINS_CAUTION, 'Never bypass a thermostat, high-limit or relief valve. Dwellhour screens; it does not certify.'],
  })
  return { subject: `Clock change at ${property.name}: ${counted(planned.length, 'visit')}`, text, html }
}
