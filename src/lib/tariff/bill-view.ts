/** A bill as lines to read: quantities with their unit, money in its currency, what is not in it. Pure. */
import type { Bill } from '#lib/core/tariff/types.ts'
import { formatMoney } from '#lib/figures.ts'

export interface BillView {
  readonly lines: readonly { readonly label: string; readonly quantity: string; readonly price: string; readonly amount: string }[]
  readonly total: string
  readonly missing: readonly string[]
}

export function billView({ lines, totalMinor, unbilled, notes }: Bill, currency: string): BillView {
  return {
    lines: lines.map(({ label, quantity, unit, priceMinorPerUnit, amountMinor }) => ({
      label,
      quantity: `${Number(quantity.toFixed(2))} ${unit}`,
      price: formatMoneyExactly(priceMinorPerUnit, currency),
      amount: formatMoney(amountMinor, currency),
    })),
    total: formatMoney(totalMinor, currency),
    missing: [...unbilled.map((one) => one.reason), ...notes],
  }
}

/** Unit prices have more digits than money. */
function formatMoneyExactly(minor: number, currency: string): string {
  const digits = new Intl.NumberFormat('en', { style: 'currency', currency }).resolvedOptions().maximumFractionDigits ?? 2
  return new Intl.NumberFormat('en', { style: 'currency', currency, maximumFractionDigits: 5 }).format(minor / 10 ** digits)
}
