/** How many minor units make a currency's major one. */
export const minorPerMajorOf = (currency: string): number =>
  10 ** (new Intl.NumberFormat('en', { style: 'currency', currency }).resolvedOptions().maximumFractionDigits ?? 2)
