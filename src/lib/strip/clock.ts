/** Elapsed minutes of a local day as wall-clock words; plain data, so that browser, mail and server say the same. */

/** The clock change inside a day: from `atMin` elapsed minutes on, the wall clock is `shiftMin` ahead of (or behind) the count. */
export interface ClockChange {
  readonly atMin: number
  readonly shiftMin: number
}

const MIN_PER_DAY = 1_440

/** "06:05"; minutes below 0 or past the day are the wall clock of the neighbouring day. */
export function clockWords(elapsedMin: number, change: ClockChange | null): string {
  const wall = Math.round(elapsedMin) + (change && elapsedMin >= change.atMin ? change.shiftMin : 0)
  const minute = ((wall % MIN_PER_DAY) + MIN_PER_DAY) % MIN_PER_DAY
  return `${String(Math.floor(minute / 60)).padStart(2, '0')}:${String(minute % 60).padStart(2, '0')}`
}
