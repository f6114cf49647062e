/** When saving a version has to be explained. Pure: the page asks for the reason, the verb insists on it. */

/** It replaces a version that is there, or gives days that have passed other prices; the first version of all does neither. */
export const needsReason = (
  effectiveFrom: string,
  { days, today }: { readonly days: readonly string[]; readonly today: string },
): boolean => days.length > 0 && (days.includes(effectiveFrom) || effectiveFrom < today)
