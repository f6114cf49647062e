/** Diagonal hatching as one path, clipped to its box by arithmetic: no pattern ids that could collide on a page or in a letter. */

export interface Box {
  readonly xPx: number
  readonly yPx: number
  readonly widthPx: number
  readonly heightPx: number
}

/** Lines rising at 45 degrees, `gapPx` apart along the base, in step with the page so that neighbours line up. */
export function hatchPath({ xPx, yPx, widthPx, heightPx }: Box, gapPx: number): string {
  const parts: string[] = []
  const right = xPx + widthPx
  const bottom = yPx + heightPx
  for (let base = Math.ceil((xPx - heightPx) / gapPx) * gapPx; base < right; base += gapPx) {
    // The line goes from (base, bottom) to (base + height, top).
    const fromX = Math.max(base, xPx)
    const toX = Math.min(base + heightPx, right)
    if (toX - fromX < 0.5) continue
    parts.push(`M${round(fromX)} ${round(bottom - (fromX - base))}L${round(toX)} ${round(bottom - (toX - base))}`)
  }
  return parts.join('')
}

const round = (value: number): number => Math.round(value * 10) / 10
