/** A tip in words: what is asked for, why, and what is left of today. */
import { describe, expect, it } from 'vitest'
import type { EvaluationOutcome } from '#db/queries/evaluation.ts'
import type { NeedOutcome } from '#lib/core/tank/types.ts'
import { saysTheSame, type TipCase, tipOf } from '#lib/tip/tip.ts'

const need = (over: Partial<NeedOutcome> = {}): NeedOutcome => ({
  need: { readyByMin: 405, count: 2, minutesEach: 8, gapMin: 5, flowLPerMin: 7.6, useTemperatureC: 40.6 },
  status: 'ready',
  reason: '',
  minutesWanted: 16,
  minutesServed: 16,
  requiredRunMin: 28,
  chosenRunMin: 30,
  shortfallMin: 0,
  startByMin: 365,
  runWindow: null,
  run: { startMin: 365, endMin: 395 },
  readyAtMin: 398,
  nextBestReadyByMin: [],
  ...over,
})
const EVENING = need({
  need: { readyByMin: 1_140, count: 1, minutesEach: 8, gapMin: 5, flowLPerMin: 7.6, useTemperatureC: 40.6 },
  startByMin: 1_100,
  readyAtMin: 1_130,
})
const tip = (needs: readonly NeedOutcome[], over: Partial<TipCase> = {}) => {
  const outcome: EvaluationOutcome = {
    reason: '',
    needs,
    runs: [],
    peaks: [],
    dayMin: 1_440,
    clockChange: null,
    powerW: 3_000,
    charge: null,
  }
  const evaluation = { status: 'ready' as const, outcome }
  return tipOf({ evaluation, pressed: true, when: 'tomorrow, Thursday', ...over })
}

describe('tipOf', () => {
  it('says what to do, what one gets and what is behind it', () => {
    expect(tip([need()])).toMatchObject({
      subject: 'Press the timer by 06:05 tomorrow, Thursday',
      figure: '06:05',
      action: 'Press the timer by then.',
      lines: ['Hot from 06:38 for two showers of 8 minutes, until 07:06.'],
      behind: 'Your timer runs at least 30 minutes: that just reaches it. Any later and the last shower turns cool.',
    })
    expect(tip([need({ chosenRunMin: 108.7 })]).behind).toContain('at least 108 minutes: 80 more than the showers need')
  })
  it('says the evening before when the start falls there', () => {
    expect(tip([need({ startByMin: -25 })]).subject).toBe('Press the timer by 23:35 the evening before tomorrow, Thursday')
  })
  it('has nothing to press for a unit on a clock, short or not', () => {
    const clocked = tip([need()], { pressed: false })
    expect(clocked.action).toBe('Nothing to press: the switch starts by itself at 06:05.')
    expect(clocked.figure).toBe('06:38')
    const short = tip([need({ status: 'short', readyAtMin: null, reason: 'The switch is on for 30 min.' })], { pressed: false })
    expect(short).toMatchObject({
      figure: null,
      subject: 'The water will be short tomorrow, Thursday',
      behind: 'The switch is on for 30 min.',
    })
    expect(short.action).toContain('Nothing to press')
  })
  it('says what a short day still gives, and the nearest times that work', () => {
    const short = tip([need({ status: 'short', minutesServed: 4.6, nextBestReadyByMin: [450, 480], reason: 'Needs 69 min.' })])
    expect(short.lines).toEqual([
      'At 06:45 the water is warm for 4 of 16 minutes. Times that work: 07:30, 08:00. Your landlord sees this too.',
    ])
    expect(short).toMatchObject({ short: true, behind: 'Needs 69 min.' })
    expect(tip([need({ status: 'short', minutesServed: 0 })]).lines[0]).toContain('not warm. No time near it works')
  })
  it('leaves out what is over today, and says when the start has passed', () => {
    const evening = tip([need(), EVENING], { when: 'today', passedMin: 700 })
    expect(evening).toMatchObject({ figure: '18:20', subject: 'Press the timer by 18:20 today' })
    expect(evening.lines).toHaveLength(1)
    expect(tip([EVENING], { when: 'today', passedMin: 1_110 }).action).toContain('press now')
    expect(tip([need(), EVENING], { when: 'today', passedMin: 1_200 })).toMatchObject({ figure: null, subject: 'Nothing to start today' })
  })
  it('names each start of a day with several', () => {
    expect(tip([need(), EVENING]).lines.map((line) => line.slice(0, 16))).toEqual(['Press by 06:05. ', 'Press by 18:20. '])
  })
})

describe('saysTheSame', () => {
  it.each([
    ['Press the timer by 06:05 today', 'Press the timer by 06:09 today', true],
    ['Press the timer by 06:05 today', 'Press the timer by 06:10 today', false],
    ['Press the timer by 06:05 today', 'Press the timer by 06:05 today: the water will be short', false],
    ['No hot water for a shower today', 'No hot water for a shower today', true],
  ])('%s / %s: %s', (before, now, same) => {
    expect(saysTheSame(before, now)).toBe(same)
  })
})
