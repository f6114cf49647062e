/** Whether a letter can be sent again, and what that does; nothing is ever sent again by itself. Pure. */
import type { MailState, MessageKind } from '#db/enums.ts'

export interface ResendCase {
  readonly kind: MessageKind
  readonly state: MailState
  readonly expiresAtMs: number | null
  /** Why its address gets nothing of this kind; `null` = nothing stands in the way. */
  readonly suppressedBecause: string | null
  /** Of an invitation: whether it may still be accepted. */
  readonly invitationIsOpen: boolean
  /** Whether the bodies were removed with age. */
  readonly bodiesRemoved: boolean
  readonly nowMs: number
}
export type ResendOutcome =
  { readonly status: 'possible'; readonly does: string } | { readonly status: 'refused'; readonly because: string }

const refused = (because: string): ResendOutcome => ({ status: 'refused', because })

export function resendOutcome({
  kind,
  state,
  expiresAtMs,
  suppressedBecause,
  invitationIsOpen,
  bodiesRemoved,
  nowMs,
}: ResendCase): ResendOutcome {
  if (state === 'queued' || state === 'sending') return refused('It has not left yet; it is sent by itself.')
  if (suppressedBecause !== null) return refused(`Nothing of this kind is sent to this address: ${suppressedBecause}`)
  if (kind === 'invitation')
    return invitationIsOpen
      ? { status: 'possible', does: 'Writes a new letter with a new link; the link in this one stops working at once.' }
      : refused('The invitation was accepted or revoked. Invite again under People.')
  if (expiresAtMs !== null && expiresAtMs <= nowMs) return refused('What it says is out of date.')
  if (bodiesRemoved) return refused('Its text was removed with age.')
  return { status: 'possible', does: DOES[state] }
}

const AGAIN = 'Queues a new letter with the same words to the same address'
const DOES: Readonly<Record<Exclude<MailState, 'queued' | 'sending'>, string>> = {
  sent: `${AGAIN}: it then arrives a second time.`,
  ambiguous: `${AGAIN}: if this one did arrive, it arrives a second time.`,
  failed: `${AGAIN}, with all its tries.`,
  bounced: `${AGAIN}, with all its tries. An address that does not exist bounces again.`,
  suppressed: `${AGAIN}; what stood in its way is gone.`,
  expired: `${AGAIN}.`,
}
