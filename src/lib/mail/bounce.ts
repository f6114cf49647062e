/** Which refusals speak of the address itself. */

/**
 * RFC 3463 3.2 and 3.3: no such mailbox, no such system, bad syntax, mailbox moved, mailbox disabled; RFC 7505 4.2: the domain takes
 * no mail. Everything else (full, too large, policy, the sender) may be different for the next letter.
 */
const DEAD: readonly string[] = ['5.1.1', '5.1.2', '5.1.3', '5.1.6', '5.1.10', '5.2.1']

export const isDeadAddress = (status: string): boolean => DEAD.includes(status)
