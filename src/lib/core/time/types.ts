/** The core's two kinds of time: instants, and civil time in a named zone. Only `core/time` converts between them. */

/** A civil date, `YYYY-MM-DD`. */
export type Day = string
/** An IANA zone name, e.g. `Europe/London`. */
export type Zone = string
/** 0 = Monday … 6 = Sunday. */
export type Weekday = 0 | 1 | 2 | 3 | 4 | 5 | 6

/** Half-open interval of instants, `[startsAtMs, endsAtMs)`. */
export interface MsInterval {
  readonly startsAtMs: number
  readonly endsAtMs: number
}

/**
 * Half-open interval of minutes, `[startMin, endMin)`, counted in elapsed minutes from a local midnight.
 * May start below 0 (the evening before) or end above 1,440 (the morning after).
 */
export interface MinuteInterval {
  readonly startMin: number
  readonly endMin: number
}

/** A civil moment: wall-clock minute of a local day. */
export interface CivilMoment {
  readonly day: Day
  readonly minuteOfDay: number
  readonly weekday: Weekday
}
