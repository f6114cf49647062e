/** The day strip as pure geometry and as SVG text: the run, the ready notch, the showers and the peak hatch, the same everywhere. */
import { clockWords } from './clock.ts'
import { hatchPath } from './hatch.ts'
import { stripSentence } from './sentence.ts'
import type { StripDay, StripGeometry } from './types.ts'

/** From this width on the whole day fits; below it the eight hours around the need. */
export const WHOLE_DAY_FROM_PX = 480
const FOCUS_MIN = 480
const HOUR_MIN = 60

const NOTCH_HEIGHT_PX = 7
const TRACK_HEIGHT_PX = 14
const LABEL_HEIGHT_PX = 18
const HATCH_GAP_PX = 6

export function dayStrip(day: StripDay, widthPx: number): StripGeometry {
  const { fromMin, toMin } = widthPx >= WHOLE_DAY_FROM_PX ? wholeDay(day) : aroundNeed(day)
  const x = (minute: number): number =>
    Math.round(((Math.min(Math.max(minute, fromMin), toMin) - fromMin) / (toMin - fromMin)) * widthPx * 10) / 10
  const span = (startMin: number, endMin: number) => ({ xPx: x(startMin), widthPx: Math.round((x(endMin) - x(startMin)) * 10) / 10 })
  const visible = ({ startMin, endMin }: { readonly startMin: number; readonly endMin: number }) => endMin > fromMin && startMin < toMin
  const trackTopPx = NOTCH_HEIGHT_PX + 1

  return {
    widthPx,
    heightPx: trackTopPx + TRACK_HEIGHT_PX + LABEL_HEIGHT_PX,
    trackTopPx,
    trackHeightPx: TRACK_HEIGHT_PX,
    fromMin,
    toMin,
    peaks: day.peaks.filter(visible).map((peak) => {
      const box = span(peak.startMin, peak.endMin)
      return { ...box, hatch: hatchPath({ ...box, yPx: trackTopPx, heightPx: TRACK_HEIGHT_PX }, HATCH_GAP_PX) }
    }),
    runs: day.runs
      .filter((run) => visible({ startMin: run.startMin, endMin: run.longestEndMin ?? toMin }))
      .map((run) => {
        const tail = span(run.endMin, run.longestEndMin ?? toMin)
        return { ...span(run.startMin, run.endMin), tail: tail.widthPx > 0 ? tail : null, short: run.short }
      }),
    showers: day.needs
      .filter((need) => visible({ startMin: need.readyByMin, endMin: need.endMin }))
      .map((need) => {
        const box = span(need.readyByMin, need.endMin)
        // A shower of a few minutes is still seen.
        return { ...box, widthPx: Math.max(box.widthPx, 5) }
      }),
    notches: day.needs
      .filter((need) => need.readyByMin >= fromMin && need.readyByMin <= toMin)
      .map((need) => {
        const xPx = x(need.readyByMin)
        const path = `M${xPx - 5} 0L${xPx + 5} 0L${xPx} ${NOTCH_HEIGHT_PX}Z`
        return { xPx, path, short: need.shortfallMin > 0 || need.readyAtMin === null }
      }),
    labels: hourLabels({ day, fromMin, toMin, widthPx }).map(({ minute, text }) => ({
      xPx: x(minute),
      anchor: minute <= fromMin ? 'start' : minute >= toMin ? 'end' : 'middle',
      text,
    })),
    sentence: stripSentence(day),
  }
}

interface Window {
  readonly fromMin: number
  readonly toMin: number
}

/** The day, longer on the left by whole hours when a run starts the evening before. */
function wholeDay(day: StripDay): Window {
  const firstMin = Math.min(0, ...day.runs.map((run) => run.startMin))
  return { fromMin: Math.floor(firstMin / HOUR_MIN) * HOUR_MIN, toMin: day.dayMin }
}

function aroundNeed(day: StripDay): Window {
  const need = day.needs[0]
  const endMin = need?.endMin ?? day.runs[0]?.endMin ?? 9 * HOUR_MIN
  const readyByMin = need?.readyByMin ?? endMin
  const startMin = day.runs.find((run) => run.startMin < endMin && run.endMin > readyByMin - FOCUS_MIN)?.startMin ?? readyByMin
  const middleMin = (Math.max(startMin, endMin - FOCUS_MIN) + endMin) / 2
  const fromMin = Math.round((middleMin - FOCUS_MIN / 2) / HOUR_MIN) * HOUR_MIN
  return { fromMin, toMin: fromMin + FOCUS_MIN }
}

/** Whole hours: every third on a wide strip, every second on a narrow one, and both ends. */
function hourLabels({ day, fromMin, toMin, widthPx }: Window & { readonly day: StripDay; readonly widthPx: number }) {
  const hours = (toMin - fromMin) / HOUR_MIN
  const everyMin = (widthPx / hours >= 24 ? 1 : hours > 12 ? 3 : 2) * HOUR_MIN
  const labels: { minute: number; text: string }[] = []
  for (let minute = fromMin; minute <= toMin; minute += everyMin) {
    // The end of the day is 24, not 00.
    const text = minute === day.dayMin ? '24' : clockWords(minute, day.clockChange).slice(0, 2)
    labels.push({ minute, text })
  }
  return labels
}

/** Colours by meaning. On a page they are the theme's variables; in a picture they are the theme's values. */
export interface StripColours {
  readonly paper: string
  readonly rule: string
  readonly soft: string
  readonly copper: string
  readonly copperWash: string
  readonly verdigris: string
  readonly well: string
  readonly sheet: string
  readonly dusk: string
  readonly duskWash: string
  readonly crimson: string
}

export const THEME_COLOURS: StripColours = {
  paper: 'var(--paper)',
  rule: 'var(--rule)',
  soft: 'var(--soft)',
  copper: 'var(--copper)',
  copperWash: 'var(--copper-wash)',
  verdigris: 'var(--verdigris)',
  well: 'var(--well)',
  sheet: 'var(--sheet)',
  dusk: 'var(--dusk)',
  duskWash: 'var(--dusk-wash)',
  crimson: 'var(--crimson)',
}

export interface StripLook {
  readonly widthPx: number
  readonly colours: StripColours
  /** Hours under the track. */
  readonly labels: boolean
  /** An image with its sentence, or decoration beside words that already say it. */
  readonly role: 'image' | 'decoration'
}

/** One look for page, table, letter and digest. Everything put into it is a number or one of our own words. */
export function dayStripSvg(day: StripDay, { widthPx, colours, labels, role }: StripLook): string {
  const strip = dayStrip(day, widthPx)
  const { trackTopPx: y, trackHeightPx: h } = strip
  const heightPx = labels ? strip.heightPx : y + h + 1
  const rect = (box: { readonly xPx: number; readonly widthPx: number }, attributes: string) =>
    `<rect x="${box.xPx}" y="${y}" width="${box.widthPx}" height="${h}" ${attributes}/>`
  const marks = [
    `<rect x="0.5" y="${y + 0.5}" width="${widthPx - 1}" height="${h - 1}" fill="${colours.paper}" stroke="${colours.rule}"/>`,
    ...strip.peaks.map(
      (peak) =>
        rect(peak, `fill="${colours.duskWash}"`) + `<path d="${peak.hatch}" stroke="${colours.dusk}" stroke-width="1.2" fill="none"/>`,
    ),
    ...strip.runs.flatMap((run) => [
      run.tail ? rect(run.tail, `fill="${colours.copperWash}" stroke="${colours.copper}" stroke-width="0.8"`) : '',
      rect(run, `fill="${colours.copper}"`),
    ]),
    ...strip.showers.map(
      (shower) =>
        `<rect x="${shower.xPx + 1}" y="${y + 1}" width="${Math.max(3, shower.widthPx - 2)}" height="${h - 2}" fill="${colours.sheet}" stroke="${colours.well}" stroke-width="2"/>`,
    ),
    ...strip.notches.map((notch) => `<path d="${notch.path}" fill="${notch.short ? colours.crimson : colours.verdigris}"/>`),
    ...(labels
      ? strip.labels.map(
          (label) =>
            `<text x="${label.xPx}" y="${strip.heightPx - 3}" text-anchor="${label.anchor}" font-size="12" font-family="Lato, sans-serif" fill="${colours.soft}">${label.text}</text>`,
        )
      : []),
  ]
  const naming = role === 'image' ? `role="img" aria-label="${strip.sentence}"` : 'aria-hidden="true"'
  return `<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 ${widthPx} ${heightPx}" width="${widthPx}" height="${heightPx}" ${naming}>${marks.join('')}</svg>`
}
