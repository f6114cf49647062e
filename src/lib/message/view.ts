/** How a letter's state and kind are said. */
import type { MailState, MessageKind } from '#db/enums.ts'
import { formatInstant, zoneCity } from '#lib/format.ts'
import type { MemberLetter } from '#lib/mail/unsubscribe.server.ts'
import type { PostQuery, StateChoice } from './schemas.ts'

export const KIND_LABEL: Readonly<Record<MessageKind, string>> = {
  invitation: 'Invitation',
  tip: 'Tip',
  'schedule-changed': 'Schedule changed',
  'visit-assigned': 'Visit assigned',
  'visit-done': 'Visit done',
  'flag-summary': 'Flags',
  'clock-change': 'Clock change',
  digest: 'Digest',
}

/** As the subject of a sentence. */
export const MEMBER_LETTER_WORDS: Readonly<Record<MemberLetter, string>> = {
  'flag-summary': 'The daily lists of flags',
  'clock-change': 'The lists of time switches to set before a clock change',
  digest: 'The monthly pages of your building',
}

/** Choices of the filter, the most used first. */
export const STATE_CHOICES: readonly (readonly [StateChoice, string])[] = [
  ['look', 'To look at'],
  ['waiting', 'Waiting'],
  ['sent', 'Sent'],
  ['bounced', 'Bounced'],
  ['failed', 'Not delivered'],
  ['ambiguous', 'Unclear'],
  ['expired', 'Out of date'],
  ['suppressed', 'Not sent'],
]

export interface LetterState {
  readonly state: MailState
  readonly attempts: number
  readonly nextAttemptAtMs: number
  readonly error: string | null
  readonly property: { readonly zone: string; readonly sendingPausedAtMs: number | null } | null
}
export interface StateWords {
  readonly word: string
  /** What is known beyond the word, and what follows from it. */
  readonly more: string | null
  readonly needsLooking: boolean
}

export function stateWords(letter: LetterState): StateWords {
  const { state, error } = letter
  switch (state) {
    case 'queued':
      if (letter.property?.sendingPausedAtMs) return { word: 'Held', more: 'Sending is paused for this property.', needsLooking: false }
      if (letter.attempts > 0)
        return {
          word: 'Waiting',
          more: `${error ?? ''} Next try ${when(letter.nextAttemptAtMs, letter.property?.zone)}.`.trim(),
          needsLooking: false,
        }
      return { word: 'Waiting', more: null, needsLooking: false }
    case 'sending':
      return { word: 'Being sent', more: null, needsLooking: false }
    case 'sent':
      return { word: 'Sent', more: null, needsLooking: false }
    case 'failed':
      return { word: 'Not delivered', more: error, needsLooking: true }
    case 'bounced':
      return { word: 'Bounced', more: `${error ?? ''} The address refused it.`.trim(), needsLooking: true }
    case 'expired':
      return { word: 'Out of date', more: 'It could not leave while what it says was true, so it was not sent.', needsLooking: false }
    case 'ambiguous':
      return { word: 'Unclear', more: `${error ?? 'The reply was lost.'} It is not sent again.`, needsLooking: true }
    case 'suppressed':
      return { word: 'Not sent', more: error ?? 'The recipient asked for no more of these.', needsLooking: false }
  }
}

/** Local to the property; a letter without one is told in UTC. */
export const when = (instantMs: number, zone = 'UTC'): string =>
  `${formatInstant(instantMs, zone, 'd MMM yyyy, HH:mm')} (${zoneCity(zone)})`

/** An address of the Post page: what it is narrowed to, and one letter opened. */
export function postHref(query: PostQuery, open: { readonly message?: string; readonly as?: 'text'; readonly page?: number } = {}): string {
  const { state, kind, property, unit } = query
  const page = open.page ?? query.page
  const asked = { state, kind, property, unit, page: page === 1 ? null : String(page), message: open.message, as: open.as }
  const search = new URLSearchParams()
  for (const [name, value] of Object.entries(asked)) if (value) search.set(name, value)
  return `?${search}${open.message ? '#letter' : ''}`
}
