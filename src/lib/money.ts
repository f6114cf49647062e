/** How money is said everywhere: in its currency, from minor units. Apart from the other figures: a phone's page loads no calendar for it. */

/** Minor units -> "£12.34". `minorMinor` never leaves the core unrounded. */
export function formatMoney(amountMinor: number, currency: string): string {
  const format = new Intl.NumberFormat('en', { style: 'currency', currency })
  const digits = format.resolvedOptions().maximumFractionDigits ?? 2
  return format.format(amountMinor / 10 ** digits)
}
