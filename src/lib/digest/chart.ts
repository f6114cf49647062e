/** A month's two drawings as accessible SVG, a bar a day: energy with its on-peak part hatched, and units warm on time; the first is also the mail's picture. */
import type { DigestDay, DigestFigures } from '#db/queries/digest.ts'
import { hatchPath } from '#lib/strip/hatch.ts'

export interface ChartColours {
  readonly ink: string
  readonly soft: string
  readonly rule: string
  readonly copper: string
  readonly verdigris: string
  readonly crimson: string
  readonly dusk: string
  readonly sheet: string
}
export const THEME: ChartColours = {
  ink: 'var(--ink)',
  soft: 'var(--soft)',
  rule: 'var(--rule)',
  copper: 'var(--copper)',
  verdigris: 'var(--verdigris)',
  crimson: 'var(--crimson)',
  dusk: 'var(--dusk)',
  sheet: 'var(--sheet)',
}

const WIDTH_PX = 640
const LEFT_PX = 44
const BOTTOM_PX = 24
const TOP_PX = 8
const HATCH_PX = 5
const ENERGY_HEIGHT_PX = 180
const UNITS_HEIGHT_PX = 120

export function chartSentence({ days, energyKwh, peakKwh }: DigestFigures): string {
  const busiest = days.reduce<DigestDay | null>((best, day) => (best === null || day.energyKwh > best.energyKwh ? day : best), null)
  const most = busiest ? `; most on the ${Number(busiest.day.slice(8))}. with ${busiest.energyKwh.toFixed(1)} kWh` : ''
  return `Energy by day: ${energyKwh.toFixed(1)} kWh in all, ${peakKwh.toFixed(1)} of it on-peak${most}.`
}

export function unitsSentence({ days, unitDaysNeeded, unitDaysWarm }: DigestFigures): string {
  const cold = days.filter((day) => (day.warmUnits ?? 0) < (day.neededUnits ?? 0)).length
  return `Units warm on time by day: ${unitDaysWarm} of ${unitDaysNeeded} unit-days; some unit ran cold on ${cold} of ${days.length} days.`
}

/** Whether the edition accounts for units by day. */
export const hasUnits = ({ days }: DigestFigures): boolean => days.some((day) => day.neededUnits !== undefined)

export function energyChartSvg(figures: DigestFigures, colours: ChartColours): string {
  const highest = Math.max(1, ...figures.days.map((day) => day.energyKwh))
  const frame = frameOf({ heightPx: ENERGY_HEIGHT_PX, highest, days: figures.days, colours })
  const bars = figures.days.map((day, index) => {
    const bar = frame.bar(index, 0, day.energyKwh)
    const peak = frame.bar(index, 0, day.peakKwh)
    return solid(bar, colours.copper) + (peak.heightPx < 1 ? '' : solid(peak, colours.sheet) + hatched(peak, colours.dusk))
  })
  return frame.svg(chartSentence(figures), bars)
}

export function unitsChartSvg(figures: DigestFigures, colours: ChartColours): string {
  const highest = Math.max(1, ...figures.days.map((day) => day.neededUnits ?? 0))
  const frame = frameOf({ heightPx: UNITS_HEIGHT_PX, highest, days: figures.days, colours })
  const bars = figures.days.map((day, index) => {
    const { warmUnits = 0, neededUnits = 0 } = day
    const cold = frame.bar(index, warmUnits, neededUnits)
    return solid(frame.bar(index, 0, warmUnits), colours.verdigris) + (neededUnits > warmUnits ? outlined(cold, colours.crimson) : '')
  })
  return frame.svg(unitsSentence(figures), bars)
}

interface Box {
  readonly xPx: number
  readonly yPx: number
  readonly widthPx: number
  readonly heightPx: number
}
interface FrameCase {
  readonly heightPx: number
  readonly highest: number
  readonly days: readonly DigestDay[]
  readonly colours: ChartColours
}

/** The axes that both drawings stand on: figures on the left, days of the month below. */
function frameOf({ heightPx, highest, days, colours }: FrameCase) {
  const plotPx = heightPx - BOTTOM_PX - TOP_PX
  const slotPx = (WIDTH_PX - LEFT_PX) / Math.max(1, days.length)
  const y = (value: number) => TOP_PX + plotPx * (1 - value / highest)
  const text = (xPx: number, yPx: number, anchor: 'middle' | 'end', words: string) =>
    `<text x="${n(xPx)}" y="${n(yPx)}" text-anchor="${anchor}" font-size="12" fill="${colours.soft}">${words}</text>`
  const marks = [0, highest / 2, highest].map(
    (value) =>
      `<line x1="${LEFT_PX}" x2="${WIDTH_PX}" y1="${n(y(value))}" y2="${n(y(value))}" stroke="${colours.rule}"/>` +
      text(LEFT_PX - 6, y(value) + 4, 'end', n(value)),
  )
  const labels = days.map((day, index) =>
    index === 0 || (index + 1) % 5 === 0
      ? text(LEFT_PX + (index + 0.5) * slotPx, heightPx - 6, 'middle', String(Number(day.day.slice(8))))
      : '',
  )
  return {
    bar: (index: number, from: number, to: number): Box => ({
      xPx: LEFT_PX + index * slotPx + 1,
      yPx: y(to),
      widthPx: Math.max(1, slotPx - 2),
      heightPx: y(from) - y(to),
    }),
    svg: (sentence: string, bars: readonly string[]): string =>
      `<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 ${WIDTH_PX} ${heightPx}" width="${WIDTH_PX}" height="${heightPx}" role="img" aria-label="${sentence}" font-family="Lato, Arial, sans-serif">${[...marks, ...bars, ...labels].join('')}</svg>`,
  }
}

const rect = ({ xPx, yPx, widthPx, heightPx }: Box, paint: string): string =>
  `<rect x="${n(xPx)}" y="${n(yPx)}" width="${n(widthPx)}" height="${n(heightPx)}" ${paint}/>`
const solid = (box: Box, colour: string): string => rect(box, `fill="${colour}"`)
/** A heavy outline: short, told by more than its colour. */
const outlined = ({ xPx, yPx, widthPx, heightPx }: Box, colour: string): string =>
  rect(
    { xPx: xPx + 1, yPx: yPx + 1, widthPx: Math.max(1, widthPx - 2), heightPx: Math.max(1, heightPx - 2) },
    `fill="none" stroke="${colour}" stroke-width="2"`,
  )
const hatched = (box: Box, colour: string): string =>
  `<path d="${hatchPath(box, HATCH_PX)}" stroke="${colour}" stroke-width="1.5" fill="none"/>`

const n = (value: number): string => String(Math.round(value * 10) / 10)
