/** The preferred values of IEC 60063, and a part's values over decades, made without rounding dust. */

/** IEC 60063. Eight of them (27 to 47, and 82) are not the rounded geometric value: the standard's list decides, not a formula. */
export const E24 = [10, 11, 12, 13, 15, 16, 18, 20, 22, 24, 27, 30, 33, 36, 39, 43, 47, 51, 56, 62, 68, 75, 82, 91] as const
export const E12 = [10, 12, 15, 18, 22, 27, 33, 39, 47, 56, 68, 82] as const
export const E6 = [10, 15, 22, 33, 47, 68] as const

/** Values of a series in `[from, to]`, both ends included, ascending. */
export function valuesBetween(series: readonly number[], { from, to }: { readonly from: number; readonly to: number }): readonly number[] {
  const values: number[] = []
  const tiny = 1e-9
  for (let exponent = Math.floor(Math.log10(from)) - 1; 10 ** exponent <= to; exponent++)
    for (const digits of series) {
      // By way of text, so that 4.7 µF is the double nearest to 4.7e-6 and equals what a person enters.
      const value = Number(`${digits}e${exponent}`)
      if (value >= from * (1 - tiny) && value <= to * (1 + tiny)) values.push(value)
    }
  return values
}

/** Whether a value is in the coarser series too: it is on more shelves. */
export const isE12 = (value: number): boolean => {
  const digits = Math.round(value / 10 ** (Math.floor(Math.log10(value) + 1e-9) - 1))
  return (E12 as readonly number[]).includes(digits)
}
