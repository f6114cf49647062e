/** How long what has run out is kept, in days: the one place, also told in the README. */
export const RETENTION_DAYS = {
  /** Sign-in limits look back an hour at most; a week leaves room to look at an attack. */
  signInAttempts: 7,
  /** Confirmation and reset letters; their links are dead within a day. */
  accountLetters: 30,
  /** Texts, pictures and links of letters; that a letter was sent, to whom and how it ended stays longer. */
  letterBodies: 90,
  /** A year and a month, so that the same night a year ago can be compared, and a month's digest still be corrected. */
  letters: 400,
  jobRuns: 400,
  /** Leases of finished periods; no job looks back further than a year. */
  finishedLeases: 400,
  /** Of a tenancy that has ended, and weeks that newer ones have replaced. */
  showerWeeks: 30,
  /** Hot and cold of a tenancy that has ended: a digest counts it without names for as long as it can be corrected. */
  feedback: 400,
  /** Accepted, revoked and expired ones hold a name and an address. */
  closedInvitations: 90,
  /** They say when somebody showered. */
  evaluations: 400,
} as const
