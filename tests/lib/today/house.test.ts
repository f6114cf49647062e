/** The house: where a unit stands, what it says at a minute, and the load under it. */
import type { Kysely } from 'kysely'
import { beforeAll, describe, expect, it } from 'vitest'
import type { Database } from '#db/schema.ts'
import { DEMO_BUILDINGS, type DemoBuilding } from '#lib/demo/buildings.ts'
import { evaluateProperty } from '#lib/evaluation/evaluate-property.server.ts'
import { cellState } from '#lib/today/cell-state.ts'
import { loadSlots } from '#lib/today/load-slots.ts'
import { loadToday } from '#lib/today/load-today.server.ts'
import { placeUnits } from '#lib/today/place-units.ts'
import type { HouseCell } from '#lib/today/types.ts'
import { subSentence } from '#lib/today/words.ts'
import { makeBuilding } from '../../support/building.ts'
import { freshDatabase } from '../../support/database.ts'
import { makeLandlord, makePerson, NOW_MS, scopeFor } from '../../support/factories.ts'

const cell: HouseCell = {
  code: '5C',
  href: '/5C',
  floor: 5,
  stack: 'C',
  runs: [{ startMin: 330, endMin: 390, longestEndMin: 395, short: false }],
  needs: [{ readyByMin: 385, endMin: 401, count: 2, minutesEach: 8, readyAtMin: 370, shortfallMin: 0 }],
  nothing: '',
  hazard: '',
  charge: [10, 20, 30],
}
const wordsAt = (minute: number, one = cell) => cellState(one, minute, null).words

describe('cellState', () => {
  it('follows a unit through its morning', () => {
    expect([300, 340, 375, 390, 395, 500].map((minute) => wordsAt(minute))).toEqual([
      'ready by 06:25',
      'running',
      'ready, running',
      'showering',
      'showering',
      'done',
    ])
  })
  it('says the shortfall and the hazard before anything else, and still knows that it runs', () => {
    const short = { ...cell, needs: cell.needs.map((need) => ({ ...need, readyAtMin: null, shortfallMin: 10.2 })) }
    expect(cellState(short, 340, null)).toMatchObject({ sign: 'short', words: '11 min short', running: true })
    expect(cellState({ ...short, hazard: 'may never stop' }, 340, null)).toMatchObject({ sign: 'hazard', words: 'may never stop' })
  })
  it('reads the charge of the quarter hour, and the last one after the trace ends', () => {
    expect([0, 29, 30, 1_000].map((minute) => cellState(cell, minute, null).chargePercent)).toEqual([10, 20, 30, 30])
    expect(cellState({ ...cell, charge: [] }, 0, null).chargePercent).toBeNull()
  })
  it('says why there is nothing', () => {
    expect(wordsAt(0, { ...cell, runs: [], needs: [], nothing: 'nobody' })).toBe('nobody')
  })
})

describe('placeUnits', () => {
  const unit = (code: string, floor: number | null, stack: string | null) => ({ code, floor, stack })
  it('puts floors from the top down and stacks from left to right, with gaps', () => {
    const floors = placeUnits([unit('1A', 1, 'A'), unit('2B', 2, 'B'), unit('1B', 1, 'B')])
    expect(floors.map((row) => [row.floor, row.columns.map((one) => one?.code ?? null)])).toEqual([
      [2, [null, '2B']],
      [1, ['1A', '1B']],
    ])
  })
  it('fills a floor from the left when two units share a stack', () => {
    const floors = placeUnits([unit('10', 1, 'A'), unit('9', 1, 'A'), unit('20', 2, 'B')])
    expect(floors[1]?.columns.map((one) => one?.code)).toEqual(['9', '10'])
  })
  it('uses reading order when a floor is not known, and loses no unit', () => {
    const units = Array.from({ length: 11 }, (_, index) => unit(`${index + 1}`, index === 4 ? null : 1, null))
    const placed = placeUnits(units).flatMap((row) => row.columns.filter((one) => one !== null))
    expect(placed.map((one) => one.code)).toEqual(units.map((one) => one.code))
  })
  it('answers for no units', () => {
    expect(placeUnits([])).toEqual([])
  })
})

describe('loadSlots', () => {
  it('shows a slot by its highest minute, expected and at the longest', () => {
    const run = { startsAtMs: 10 * 60_000, endsAtMs: 20 * 60_000, longestEndsAtMs: 31 * 60_000, powerW: 3_000 }
    const slots = loadSlots([run], { range: { startsAtMs: 0, endsAtMs: 60 * 60_000 }, baseLoadW: 500 })
    expect(slots.map((slot) => slot.expectedW)).toEqual([3_500, 3_500, 500, 500])
    expect(slots.map((slot) => slot.longestW)).toEqual([3_500, 3_500, 3_500, 500])
  })
})

describe('subSentence', () => {
  it('counts what is short, what may never stop and how near the limit is', () => {
    const dangerous = [{ kind: 'may-never-stop' as const }, { kind: 'hardware-fails' as const }]
    expect(subSentence({ cold: 3, dangerous, busiest: { fraction: 0.712, time: '06:35' }, computed: true })).toBe(
      '3 units run short, 1 timer may never stop, 1 other hazard waits. At the most the building comes to 71 % of its service limit, at 06:35.',
    )
  })
  it('says that all is well', () => {
    expect(subSentence({ cold: 0, dangerous: [], busiest: null, computed: true })).toBe('Nothing is short and nothing is dangerous.')
  })
})

describe('loadToday', () => {
  const building = DEMO_BUILDINGS[1] as DemoBuilding
  let connection: Kysely<Database>
  let db: Awaited<ReturnType<typeof makeLandlord>>
  const asked = { propertySlug: building.slug, organisationSlug: 'o', day: null, nowMs: NOW_MS }
  beforeAll(async () => {
    connection = await freshDatabase()
    db = await makeLandlord(connection)
    const made = await makeBuilding(db, building)
    await evaluateProperty(db, { propertyId: made.propertyId, nowMs: NOW_MS })
  })
  it('answers how many of the units that want water will be warm tomorrow', async () => {
    const page = await loadToday(db, asked)
    expect(page.answer).toEqual({ warm: 21, wanted: 23, unknown: 0 })
    expect(page.cold.map((item) => item.code).sort()).toEqual(['2A', '5C'])
    expect(page.dangerous.map((item) => item.code)).toContain('4B')
    expect(page.house.cells).toHaveLength(24)
  })
  it('stands at the local time of now, and on another day at its busiest quarter hour', async () => {
    // 12:00 UTC on 1 December is 04:00 in Los Angeles.
    expect((await loadToday(db, asked)).house).toMatchObject({ day: '2026-12-01', atMin: 240 })
    const { house } = await loadToday(db, { ...asked, day: '2026-12-02' })
    expect(house.slots[house.atMin / 15]?.expectedW).toBe(Math.max(...house.slots.map((slot) => slot.expectedW)))
  })
  it('shows today when asked for a day that is not computed', async () => {
    expect((await loadToday(db, { ...asked, day: '2031-01-01' })).house.day).toBe('2026-12-01')
  })
  it("answers not found for another organisation's property", async () => {
    await expect(loadToday(await makeLandlord(connection), asked)).rejects.toMatchObject({ code: 'not-found' })
  })
  it('is for landlords', async () => {
    const tenant = await scopeFor(connection, {
      organisationId: db.scope.organisationId,
      personId: await makePerson(connection),
      roles: ['tenant'],
    })
    await expect(loadToday(tenant, asked)).rejects.toMatchObject({ code: 'forbidden' })
  })
})
