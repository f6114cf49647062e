/** Energy by day as an accessible SVG: a bar a day, its on-peak part hatched; the same drawing in the page and, as a picture, in the mail. */
import type { DigestFigures } from '#db/queries/digest.ts'
import { hatchPath } from '#lib/strip/hatch.ts'

export interface ChartColours {
  readonly ink: string
  readonly soft: string
  readonly rule: string
  readonly copper: string
  readonly dusk: string
  readonly sheet: string
}
export const THEME: ChartColours = {
  ink: 'var(--ink)',
  soft: 'var(--soft)',
  rule: 'var(--rule)',
  copper: 'var(--copper)',
  dusk: 'var(--dusk)',
  sheet: 'var(--sheet)',
}

const WIDTH_PX = 640
const HEIGHT_PX = 180
const LEFT_PX = 44
const BOTTOM_PX = 24
const TOP_PX = 8

export function chartSentence(figures: DigestFigures): string {
  const busiest = figures.days.reduce(
    (best, day) => (day.energyKwh > best.energyKwh ? day : best),
    figures.days[0] ?? { day: '', energyKwh: 0 },
  )
  return `Energy by day: ${figures.energyKwh.toFixed(1)} kWh in all, ${figures.peakKwh.toFixed(1)} of it on-peak; most on the ${Number(busiest.day.slice(8))}. with ${busiest.energyKwh.toFixed(1)} kWh.`
}

export function energyChartSvg(figures: DigestFigures, colours: ChartColours): string {
  const plotHeightPx = HEIGHT_PX - BOTTOM_PX - TOP_PX
  const highest = Math.max(1, ...figures.days.map((day) => day.energyKwh))
  const slotPx = (WIDTH_PX - LEFT_PX) / Math.max(1, figures.days.length)
  const y = (energyKwh: number) => TOP_PX + plotHeightPx * (1 - energyKwh / highest)
  const bars = figures.days.map((day, index) => {
    const xPx = LEFT_PX + index * slotPx + 1
    const widthPx = Math.max(1, slotPx - 2)
    const bar = `<rect x="${n(xPx)}" y="${n(y(day.energyKwh))}" width="${n(widthPx)}" height="${n(y(0) - y(day.energyKwh))}" fill="${colours.copper}"/>`
    const peakPx = y(0) - y(day.peakKwh)
    const peak =
      peakPx < 1
        ? ''
        : `<rect x="${n(xPx)}" y="${n(y(day.peakKwh))}" width="${n(widthPx)}" height="${n(peakPx)}" fill="${colours.sheet}"/><path d="${hatchPath({ xPx, yPx: y(day.peakKwh), widthPx, heightPx: peakPx }, 5)}" stroke="${colours.dusk}" stroke-width="1.5" fill="none"/>`
    const label =
      (index + 1) % 5 === 0 || index === 0
        ? `<text x="${n(xPx + widthPx / 2)}" y="${HEIGHT_PX - 6}" text-anchor="middle" font-size="12" fill="${colours.soft}">${index + 1}</text>`
        : ''
    return bar + peak + label
  })
  const marks = [0, highest / 2, highest].map(
    (value) =>
      `<line x1="${LEFT_PX}" x2="${WIDTH_PX}" y1="${n(y(value))}" y2="${n(y(value))}" stroke="${colours.rule}"/><text x="${LEFT_PX - 6}" y="${n(y(value) + 4)}" text-anchor="end" font-size="12" fill="${colours.soft}">${Math.round(value)}</text>`,
  )
  return `<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 ${WIDTH_PX} ${HEIGHT_PX}" width="${WIDTH_PX}" height="${HEIGHT_PX}" role="img" aria-label="${chartSentence(figures)}" font-family="Lato, Arial, sans-serif">${marks.join('')}${bars.join('')}</svg>`
}

const n = (value: number): string => String(Math.round(value * 10) / 10)
