/** Fixes that are no setting of the timer: each that is named makes the week ready in the model, and none is named that is not needed. */
import { describe, expect, it } from 'vitest'
import { servesWeek } from '#lib/core/tank/serves-week.ts'
import type { UnitDay } from '#lib/core/tank/types.ts'
import { otherFixes } from '#lib/evaluation/other-fixes.ts'
import { pressedFor, showers, unitDay } from '../../support/tank-cases.ts'

const week = (patch: Partial<UnitDay>): readonly UnitDay[] => Array.from({ length: 7 }, () => unitDay(patch))
const numberIn = (text: string | undefined): number => Number(/([\d.]+)/.exec(text ?? '')?.[1])
const short = week({ runs: pressedFor(24), needs: [showers({ minutesEach: 9, flowLPerMin: 8.2 })] })
const labelled = (start: string) => otherFixes(short).find((fix) => fix.label.startsWith(start))?.label

describe('otherFixes', () => {
  it('begins from a week that is short', () => {
    expect(servesWeek(short)).toBe(false)
    expect(otherFixes(short).length).toBeGreaterThanOrEqual(3)
  })
  it('names an element with which the week is ready, and not with the next smaller one that is sold', () => {
    const powerW = numberIn(labelled('Fit elements'))
    const with_ = (ratedPowerW: number) =>
      servesWeek(
        short.map((day) => ({
          ...day,
          tank: { ...day.tank, upperElement: { ratedPowerW, ratedVoltageV: 240 }, lowerElement: { ratedPowerW, ratedVoltageV: 240 } },
        })),
      )
    expect(with_(powerW)).toBe(true)
    expect(with_(4_500)).toBe(false)
  })
  it('names a flow and a shower length with which the week is ready', () => {
    const flowLPerMin = numberIn(labelled('Fit a shower head'))
    const minutesEach = numberIn(labelled('Showers of'))
    expect(servesWeek(short.map((day) => ({ ...day, needs: day.needs.map((need) => ({ ...need, flowLPerMin })) })))).toBe(true)
    expect(servesWeek(short.map((day) => ({ ...day, needs: day.needs.map((need) => ({ ...need, minutesEach })) })))).toBe(true)
  })
  it('names none that the model does not find ready', () => {
    expect(otherFixes(week({ runs: pressedFor(2), needs: [showers({ count: 4, minutesEach: 20, flowLPerMin: 15 })] }))).toEqual([])
  })
})
