/** The day strip against geometry that can be worked out by hand, and its words against what it draws. */
import { readFileSync } from 'node:fs'
import sharp from 'sharp'
import { describe, expect, it } from 'vitest'
import { clockWords } from '#lib/strip/clock.ts'
import { dayStrip, dayStripSvg, THEME_COLOURS } from '#lib/strip/day-strip.ts'
import { dayStripPng } from '#lib/strip/day-strip-png.server.ts'
import { hatchPath } from '#lib/strip/hatch.ts'
import { ZINC } from '#lib/strip/palette.ts'
import type { StripDay } from '#lib/strip/types.ts'

const morning: StripDay = {
  runs: [{ startMin: 330, endMin: 390, longestEndMin: 400, short: false }],
  needs: [{ readyByMin: 390, endMin: 411, count: 2, minutesEach: 8, readyAtMin: 388, shortfallMin: 0 }],
  peaks: [{ startMin: 420, endMin: 600 }],
  dayMin: 1_440,
  clockChange: null,
}
const short: StripDay = {
  ...morning,
  needs: [{ readyByMin: 390, endMin: 411, count: 2, minutesEach: 8, readyAtMin: null, shortfallMin: 10.4 }],
}

describe('dayStrip', () => {
  it('lays the whole day over the width from 480 px on', () => {
    const strip = dayStrip(morning, 720)
    expect([strip.fromMin, strip.toMin]).toEqual([0, 1_440])
    expect(strip.runs[0]).toMatchObject({ xPx: 165, widthPx: 30, tail: { xPx: 195, widthPx: 5 } })
    expect(strip.peaks[0]).toMatchObject({ xPx: 210, widthPx: 90 })
  })
  it('shows eight whole hours that hold the run and the showers on a narrow strip', () => {
    const strip = dayStrip(morning, 240)
    expect(strip.toMin - strip.fromMin).toBe(480)
    expect(strip.fromMin % 60).toBe(0)
    expect(strip.fromMin).toBeLessThanOrEqual(330)
    expect(strip.toMin).toBeGreaterThanOrEqual(411)
    expect(strip.labels[0]).toMatchObject({ xPx: 0, anchor: 'start', text: '02' })
  })
  it('starts in the evening before when a run does', () => {
    const early = { ...morning, runs: [{ startMin: -90, endMin: 30, longestEndMin: 30, short: false }] }
    expect(dayStrip(early, 720).fromMin).toBe(-120)
    expect(dayStrip(early, 720).labels[0]?.text).toBe('22')
  })
  it('says the day in one sentence', () => {
    expect(dayStrip(morning, 240).sentence).toBe(
      'Runs 05:30 to 06:30, at the longest 06:40; ready at 06:28 for 2 showers of 8 min from 06:30 until 06:51; on-peak 07:00 to 10:00.',
    )
  })
  it('says the shortfall rounded up, and marks its notch', () => {
    const strip = dayStrip(short, 240)
    expect(strip.sentence).toContain('11 min too short for 2 showers of 8 min from 06:30')
    expect(strip.notches[0]?.short).toBe(true)
    expect(dayStrip(morning, 240).notches[0]?.short).toBe(false)
  })
  it('says that a run may never stop and draws its tail to the edge', () => {
    const endless = { ...morning, runs: [{ startMin: 330, endMin: 390, longestEndMin: null, short: false }] }
    const strip = dayStrip(endless, 720)
    expect(strip.sentence).toContain('may never stop')
    expect(strip.runs[0]?.tail).toEqual({ xPx: 195, widthPx: 525 })
  })
  it('answers for a day with nothing in it', () => {
    const empty = { ...morning, runs: [], needs: [], peaks: [] }
    expect(dayStrip(empty, 240).sentence).toBe('No run; nobody wants hot water.')
  })
})

describe('clockWords', () => {
  it('follows the wall clock over a change inside the day', () => {
    // Europe/London, 29 March 2026: 01:00 becomes 02:00, so 330 elapsed minutes are 06:30 (tz database).
    expect(clockWords(330, { atMin: 60, shiftMin: 60 })).toBe('06:30')
    expect(clockWords(59, { atMin: 60, shiftMin: 60 })).toBe('00:59')
    expect(clockWords(-30, null)).toBe('23:30')
  })
})

describe('hatchPath', () => {
  it('keeps every line inside its box', () => {
    const numbers = hatchPath({ xPx: 10, yPx: 8, widthPx: 40, heightPx: 14 }, 6)
      .split(/[ML]/)
      .filter(Boolean)
      .map((pair) => pair.split(' ').map(Number))
    expect(numbers.length).toBeGreaterThan(10)
    for (const [x = -1, y = -1] of numbers) {
      expect(x).toBeGreaterThanOrEqual(10)
      expect(x).toBeLessThanOrEqual(50)
      expect(y).toBeGreaterThanOrEqual(8)
      expect(y).toBeLessThanOrEqual(22)
    }
  })
})

describe('dayStripSvg', () => {
  it('names its image by the sentence and uses the theme only', () => {
    const svg = dayStripSvg(morning, { widthPx: 240, colours: THEME_COLOURS, labels: true, role: 'image' })
    expect(svg).toContain(`aria-label="${dayStrip(morning, 240).sentence}"`)
    expect(svg).not.toMatch(/#[0-9a-f]{3,6}/i)
  })
})

describe('ZINC', () => {
  it('holds the values of the light theme', () => {
    const css = readFileSync('src/styles/global.css', 'utf8')
    const light = css.slice(css.indexOf(':root'), css.indexOf('@media (prefers-color-scheme'))
    for (const [name, value] of Object.entries(ZINC)) {
      expect(light).toContain(`--${name.replace(/[A-Z]/g, (letter) => `-${letter.toLowerCase()}`)}: ${value};`)
    }
  })
})

describe('dayStripPng', () => {
  it('draws the run in copper at twice the width', async () => {
    const { base64, sentence } = await dayStripPng(morning, 240)
    const { data, info } = await sharp(Buffer.from(base64, 'base64')).raw().toBuffer({ resolveWithObject: true })
    expect(info.width).toBe(480)
    const strip = dayStrip(morning, 240)
    const run = strip.runs[0]
    const x = Math.round(((run?.xPx ?? 0) + (run?.widthPx ?? 0) / 2) * 2)
    const y = (strip.trackTopPx + strip.trackHeightPx / 2) * 2
    const at = (y * info.width + x) * info.channels
    expect([data[at], data[at + 1], data[at + 2]]).toEqual([0xa8, 0x48, 0x1f])
    expect(sentence).toContain('06:30')
  })
})
