/** The closed word lists that columns hold; each list is also the CHECK of its column. */

export const ROLES = ['landlord', 'tenant', 'electrician', 'owner'] as const
export type Role = (typeof ROLES)[number]

/**
 * `sending` is written before the SMTP dialogue; found again after a crash it becomes `ambiguous` and is shown, not repeated.
 * `expired`: out of date before it could leave. `bounced`: the address refused it, at once or later.
 */
export const MAIL_STATES = ['queued', 'sending', 'sent', 'failed', 'ambiguous', 'suppressed', 'expired', 'bounced'] as const
export type MailState = (typeof MAIL_STATES)[number]

export const FLAG_KINDS = [
  'misses-recovery',
  'may-never-stop',
  'hardware-fails',
  'over-service',
  'clock-is-off',
  'growth-range',
  'scald-risk',
  'not-evaluated',
  'model-disagrees',
] as const
export type FlagKind = (typeof FLAG_KINDS)[number]

export const MESSAGE_KINDS = [
  'invitation',
  'tip',
  'schedule-changed',
  'visit-assigned',
  'visit-done',
  'flag-summary',
  'clock-change',
  'digest',
] as const
export type MessageKind = (typeof MESSAGE_KINDS)[number]
