/** The year ahead and the chance of a morning, in words. */
import type { Chance } from '#lib/core/tank/chance.ts'
import type { Limit, Outlook } from '#lib/core/tank/outlook.ts'
import { formatDay } from '#lib/format.ts'

export function outlookWords({ status, limit, afterChange, spells, coldestInletC, warmestInletC }: Outlook): string {
  const mains = `Cold water here is between ${coldestInletC.toFixed(1)} and ${warmestInletC.toFixed(1)} °C over the year.`
  const clock = afterChange
    ? ` Its clock does not follow the clock change: until somebody resets it, this week of showers then ${limitWords(afterChange)}.`
    : ''
  switch (status) {
    case 'all-year':
      return `This week of showers is warm all year.${clock} ${mains}`
    case 'never':
      return `This week of showers is short all year, in summer too. ${mains}`
    case 'no-need':
      return 'Nobody has said when they shower, so there is nothing to look ahead for.'
    case 'part':
      return `Short ${spells.map(({ firstDay, lastDay }) => `from ${formatDay(firstDay, 'd MMMM yyyy')} to ${formatDay(lastDay, 'd MMMM yyyy')}`).join(' and ')}: this week of showers ${limitWords(limit)}.${clock} ${mains}`
  }
}

const limitWords = (limit: Limit): string =>
  limit.kind === 'always'
    ? 'is warm with any cold water of the year'
    : limit.kind === 'never'
      ? 'is short with any cold water of the year'
      : `needs cold water of ${limit.inletC.toFixed(1)} °C or more`

/** "ready 19 mornings in 20"; a promise errs on the cold side. */
export const chanceWords = (chance: Chance | null): string =>
  chance === null ? '' : `ready ${chance.ready.mornings} days in ${chance.ready.outOf}`

export const CHANCE_BASIS =
  'Chance: the same week over what the timer may do and over what is not known of cold water (±3 K), voltage (±5 %), flow (±15 %) and tank volume (±4 %); the timer is pressed when told.'
