/** Figures in words that need no calendar: they keep its library out of an island that has no dates to say. */

/** Wall-clock minute of day -> "06:05"; 1,440 -> "24:00". */
export function formatMinuteOfDay(minuteOfDay: number): string {
  const minute = Math.round(minuteOfDay)
  return `${String(Math.floor(minute / 60)).padStart(2, '0')}:${String(minute % 60).padStart(2, '0')}`
}

/** Minor units -> "£12.34". `minorMinor` never leaves the core unrounded. */
export function formatMoney(amountMinor: number, currency: string): string {
  const format = new Intl.NumberFormat('en', { style: 'currency', currency })
  const digits = format.resolvedOptions().maximumFractionDigits ?? 2
  return format.format(amountMinor / 10 ** digits)
}

/** "1 unit", "3 units". */
export const counted = (count: number, one: string, many = `${one}s`): string => `${count} ${count === 1 ? one : many}`
