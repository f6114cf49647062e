/** The daily list of flags as a letter: the worst first, each with a link to where it is worked. */
import type { UnitId } from '#db/ids.ts'
import type { Flag } from '#db/queries/flag.ts'
import type { Property } from '#db/queries/property.ts'
import { processConfig } from '#lib/config.server.ts'
import { MAINS_CAUTION } from '#lib/core/hardware/verdict.ts'
import { counted, placeAndTime } from '#lib/format.ts'
import { letter } from '#lib/mail/letter.ts'
import type { Unsubscribe } from '#lib/mail/unsubscribe.server.ts'
import { ageWords, byUrgency, KIND_WORDS, SEVERITIES, SEVERITY_WORDS } from './view.ts'

export interface FlagSummaryCase {
  readonly property: Pick<Property, 'slug' | 'name' | 'zone'>
  readonly slug: string | null
  readonly codes: ReadonlyMap<UnitId, string>
  readonly open: readonly Flag[]
  readonly closedSince: readonly Flag[]
  /** When the reader was last told; `null` = never. */
  readonly sinceMs: number | null
  readonly nowMs: number
  readonly unsubscribe: Unsubscribe
}

/** More of one severity are counted, not listed: the page has them all. */
const MOST_LISTED = 20

export function flagSummaryLetter({ property, slug, codes, open, closedSince, sinceMs, nowMs, unsubscribe }: FlagSummaryCase) {
  const house = `${processConfig().baseUrl}/o/${slug}/p/${property.slug}`
  const dangerous = open.filter((flag) => flag.severity === 'dangerous').length
  const item = (flag: Flag) => {
    const code = flag.unitId ? codes.get(flag.unitId) : undefined
    const isNew = sinceMs !== null && flag.openedAtMs > sinceMs
    return {
      text: `${code ?? 'The building'}: ${KIND_WORDS[flag.kind].toLowerCase()}. ${flag.summary} (${isNew ? 'new' : ageWords(flag.openedAtMs, nowMs)})`,
      url: code ? `${house}/units/${encodeURIComponent(code)}` : `${house}/flags`,
    }
  }
  const lists = SEVERITIES.flatMap((severity) => {
    const flags = open.filter((flag) => flag.severity === severity).sort(byUrgency)
    const more = flags.length - MOST_LISTED
    return flags.length === 0
      ? []
      : [
          {
            heading: `${SEVERITY_WORDS[severity]}: ${flags.length}`,
            items: [...flags.slice(0, MOST_LISTED).map(item), ...(more > 0 ? [{ text: `and ${more} more`, url: `${house}/flags` }] : [])],
          },
        ]
  })
  const subject =
    open.length === 0
      ? `Nothing to see to at ${property.name}: no flag is open any more`
      : dangerous > 0
        ? `See to ${counted(dangerous, 'dangerous flag')} at ${property.name} (${open.length} open)`
        : `See to ${counted(open.length, 'flag')} at ${property.name}`
  const { text, html } = letter({
    title: open.length === 0 ? `No flag is open at ${property.name}.` : `${counted(open.length, 'flag')} open at ${property.name}`,
    paragraphs: [
      placeAndTime(property, nowMs),
      ...(closedSince.length > 0 ? [`${counted(closedSince.length, 'flag')} closed since you were last told.`] : []),
    ],
    lists,
    actions: [{ label: 'Work the flags', url: `${house}/flags` }],
    footer: [
      ...(open.length > 0 ? [MAINS_CAUTION] : []),
      'You get this on days on which something has changed, because you run this building.',
      unsubscribe.footer,
    ],
  })
  return { subject, text, html, headers: unsubscribe.headers, secrets: [unsubscribe.secret] }
}
