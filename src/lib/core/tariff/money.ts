/** Money and prices as decimals: published figures are decimal, and so are the amounts that bills round. */

/**
 * The decimal number meant by a sum or product of decimals: 0.01973 + 0.01882, times 100, is 3.855 again and not its neighbour in
 * binary. Twelve digits keep a fraction of a minor unit in a bill of any size that a building gets.
 */
export const decimal = (value: number): number => Number(value.toPrecision(12))

/** Whole minor units, a half upwards; adding nothing turns a negative zero into zero. */
export const roundMinor = (exactMinor: number): number => Math.round(decimal(exactMinor)) + 0
