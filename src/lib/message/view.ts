/** How a letter's state and kind are said. */
import type { MailState, MessageKind } from '#db/enums.ts'
import { formatInstant, zoneCity } from '#lib/format.ts'

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
    case 'ambiguous':
      return { word: 'Unclear', more: `${error ?? 'The reply was lost.'} It is not sent again.`, needsLooking: true }
    case 'suppressed':
      return { word: 'Not sent', more: error ?? 'The recipient asked for no more of these.', needsLooking: false }
  }
}

/** Local to the property; a letter without one is told in UTC. */
export const when = (instantMs: number, zone = 'UTC'): string =>
  `${formatInstant(instantMs, zone, 'd MMM yyyy, HH:mm')} (${zoneCity(zone)})`
