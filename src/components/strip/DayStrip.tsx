/** The day strip inside islands: the same SVG as everywhere. */
import { useMemo } from 'react'
import { dayStripSvg, THEME_COLOURS } from '#lib/strip/day-strip.ts'
import type { StripDay } from '#lib/strip/types.ts'

interface Props {
  readonly day: StripDay
  readonly widthPx: number
  readonly labels?: boolean
  readonly role?: 'image' | 'decoration'
}

export function DayStrip({ day, widthPx, labels = true, role = 'image' }: Props) {
  const svg = useMemo(() => dayStripSvg(day, { widthPx, colours: THEME_COLOURS, labels, role }), [day, widthPx, labels, role])
  // The markup is made of numbers and our own words only, by `dayStripSvg`.
  return <span className="block max-w-full [&>svg]:block [&>svg]:h-auto [&>svg]:w-full" dangerouslySetInnerHTML={{ __html: svg }} />
}
