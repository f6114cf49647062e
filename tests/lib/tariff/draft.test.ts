/** The editor's draft bills like the version it came from; painting and reshaping change what they say and nothing else. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { checkVersion } from '#lib/core/tariff/check-version.ts'
import { priceAt } from '#lib/core/tariff/price.ts'
import type { TariffVersion } from '#lib/core/tariff/types.ts'
import { differencesOf } from '#lib/tariff/differences.ts'
import { blankDraft, draftOf } from '#lib/tariff/draft.ts'
import {
  addDayType,
  addPeriod,
  addSeason,
  changeSeason,
  removePeriod,
  removeSeason,
  withPeriodDemand,
  withSpecialDay,
} from '#lib/tariff/draft-shape.ts'
import { columnsOf, paint, periodAt, slotCount, withSlots } from '#lib/tariff/paint.ts'
import { patternsOf } from '#lib/tariff/patterns.ts'
import { readRecord, versionOf } from '../../core/tariff/cases.ts'

const RECORDS = ['pge-e19-2019', 'psco-rd-2018', 'fpl-rs1', 'entergy-lps-tou-2018', 'psco-spvtou-b-2019', 'south-central-lp1'] as const
const published = (name: string) => versionOf(readRecord(`${name}.urdb.json`), '2026-01-01')
const zone = 'America/Denver'
const HOUR_MS = 3_600_000
const YEAR_MS = Date.UTC(2026, 0, 1, 12)
const samePrices = (one: TariffVersion, other: TariffVersion) => {
  for (let hour = 0; hour < 8_700; hour += 5) {
    const atMs = YEAR_MS + hour * HOUR_MS
    expect(priceAt({ zone, versions: [one] }, atMs)).toEqual(priceAt({ zone, versions: [other] }, atMs))
  }
}
/** Summer and winter, hours. */
const two = addSeason(addPeriod(blankDraft({ effectiveFrom: '2026-01-01', currency: 'USD', minorPerMajor: 100 }), 'energy'), {
  name: 'Summer',
  startsOn: '06-01',
})

describe('draftOf', () => {
  it.each(RECORDS)('prices every hour of a year as the published %s does, and can be saved', (name) => {
    const version = published(name)
    const draft = draftOf(version)
    expect(checkVersion(draft)).toEqual([])
    samePrices(version, draft)
    expect(differencesOf(version, draft).filter((line) => !line.startsWith('Name'))).toEqual([])
  })
  it('joins months that are alike into seasons, over the new year too', () => {
    // The record's summer is May to October.
    expect(draftOf(published('pge-e19-2019')).seasons).toEqual([
      { name: 'May to October', startsOn: '05-01' },
      { name: 'November to April', startsOn: '11-01' },
    ])
    expect(draftOf(published('fpl-rs1')).seasons).toEqual([{ name: 'All year', startsOn: '01-01' }])
  })
})

describe('paint', () => {
  it('gives a rectangle its period and leaves every other cell as it was', () => {
    const columns = columnsOf(two, 'energy')
    const cell = (most: number) =>
      fc.tuple(fc.nat(most - 1), fc.nat(most - 1)).map(([a, b]) => [Math.min(a, b), Math.max(a, b) + 1] as const)
    fc.assert(
      fc.property(cell(columns.length), cell(24), ([fromColumn, toColumn], [fromSlot, toSlot]) => {
        const painted = paint(two, 'energy', { fromColumn, toColumn, fromSlot, toSlot }, 1)
        columns.forEach((column, index) => {
          for (let slot = 0; slot < 24; slot++) {
            const isIn = index >= fromColumn && index < toColumn && slot >= fromSlot && slot < toSlot
            expect(periodAt(painted, 'energy', column, slot)).toBe(isIn ? 1 : 0)
          }
        })
      }),
      { numRuns: 100 },
    )
  })
  it('paints a demand layer of its own, without touching energy', () => {
    const draft = withPeriodDemand(addDayType(two, 'Holiday'))
    const painted = paint(draft, 'demand', { fromColumn: 2, toColumn: 3, fromSlot: 0, toSlot: 24 }, 1)
    expect(columnsOf(draft, 'demand')[2]).toEqual({ season: 0, dayType: 'Holiday' })
    expect(periodAt(painted, 'demand', { season: 0, dayType: 'Holiday' }, 5)).toBe(1)
    expect(painted.weekdayGrid).toEqual(draft.weekdayGrid)
    expect(painted.extraDayTypes?.[0]?.energyGrid).toEqual(draft.extraDayTypes?.[0]?.energyGrid)
  })
})

describe('withSlots', () => {
  it('refines without a change of price, and goes back only where no half hour differs', () => {
    const finer = withSlots(two, 48)!
    expect(slotCount(finer)).toBe(48)
    samePrices(two, finer)
    expect(withSlots(finer, 24)).toEqual(two)
    expect(withSlots(paint(finer, 'energy', { fromColumn: 0, toColumn: 1, fromSlot: 13, toSlot: 14 }, 1), 24)).toBeNull()
  })
})

describe('the shape of a draft', () => {
  it('keeps each season’s hours when another begins earlier in the year', () => {
    const painted = paint(two, 'energy', { fromColumn: 2, toColumn: 4, fromSlot: 12, toSlot: 18 }, 1)
    const moved = changeSeason(painted, 1, { startsOn: '05-15' })
    const three = addSeason(moved, { name: 'Spring', startsOn: '03-01' })
    expect(three.seasons.map((season) => season.name)).toEqual(['All year', 'Spring', 'Summer'])
    expect(periodAt(three, 'energy', { season: 1, dayType: 'weekday' }, 13)).toBe(0)
    expect(periodAt(three, 'energy', { season: 2, dayType: 'weekday' }, 13)).toBe(1)
    expect(checkVersion({ ...removeSeason(three, 1), name: 'n' })).toEqual([])
  })
  it('gives the hours of a period that goes to the first, and renumbers the ones after it', () => {
    const draft = paint(addPeriod(two, 'energy'), 'energy', { fromColumn: 0, toColumn: 1, fromSlot: 0, toSlot: 6 }, 2)
    const less = removePeriod(paint(draft, 'energy', { fromColumn: 0, toColumn: 1, fromSlot: 6, toSlot: 9 }, 1), 'energy', 1)
    expect(less.weekdayGrid[0]?.slice(0, 10)).toEqual([1, 1, 1, 1, 1, 1, 0, 0, 0, 0])
    expect(less.periodNames).toHaveLength(2)
  })
  it('lists special days in order, each once', () => {
    const days = withSpecialDay(
      withSpecialDay(withSpecialDay(two, '2027-12-25', 'weekend'), '2027-01-01', 'weekend'),
      '2027-12-25',
      'weekday',
    )
    expect(days.specialDays).toEqual([
      { day: '2027-01-01', dayType: 'weekend' },
      { day: '2027-12-25', dayType: 'weekday' },
    ])
  })
})

describe('patternsOf', () => {
  it('hatches the dearest, leaves the cheapest blank and tells the others apart', () => {
    const draft = draftOf(published('pge-e19-2019'))
    // 9.593, 11.253, 8.837, 11.883 and 16.484 cents.
    expect(patternsOf(draft, 'energy')).toEqual(['lines', 'bars', 'plain', 'cross', 'dusk'])
    expect(patternsOf(two, 'energy')).toEqual(['plain', 'plain'])
  })
})

describe('differencesOf', () => {
  it('names prices, hours and days that differ, and nothing else', () => {
    const before = { ...draftOf(published('fpl-rs1')) }
    const painted = paint(addPeriod(before, 'energy'), 'energy', { fromColumn: 0, toColumn: 1, fromSlot: 16, toSlot: 20 }, 1)
    const after = withSpecialDay(painted, '2026-07-03', 'weekend')
    expect(differencesOf(before, after)).toEqual([
      'Price of Period B: added.',
      'Energy hours of weekdays: 16:00–20:00 changed in 12 of 12 months.',
      'Holidays and special days added: 2026-07-03 (weekend).',
    ])
    expect(differencesOf(before, before)).toEqual([])
  })
})
