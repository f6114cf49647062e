/** Figures of checks as they are read: with their unit, no more digits than matter. */
export const ampere = (value: number): string => (value < 1 ? `${Number((value * 1_000).toFixed(1))} mA` : `${Number(value.toFixed(2))} A`)
export const volt = (value: number): string => `${value.toFixed(2)} V`

/** Rounding of binary fractions: 1,440 W at 120 V is exactly 80 % of 15 A and must not miss it by the last bit. */
export const EQUAL_WITHIN_A = 1e-9
