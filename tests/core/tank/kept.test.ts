/** What is promised of a week, kept: the very starts that are told, lived through by the tank from day to day, serve what was told. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { chancesOf } from '#lib/core/tank/chance.ts'
import { seasonOutlook } from '#lib/core/tank/outlook.ts'
import { servesWeek } from '#lib/core/tank/serves-week.ts'
import { type MixedDraw, simulate, type TankState, uniformState } from '#lib/core/tank/simulate.ts'
import type { InletClimate, NeedOutcome, Readiness, ShowerNeed, UnitDay } from '#lib/core/tank/types.ts'
import { assessReadiness, assessWeek } from '#lib/core/tank/week.ts'
import type { MinuteInterval } from '#lib/core/time/types.ts'
import { pressedFor, showers, UNIT_TANK, unitDay } from '../../support/tank-cases.ts'
import { weekArb } from '../../support/random-weeks.ts'
import { tankModel } from '#lib/core/tank/model.ts'

const MIN_PER_DAY = 1_440
/** Turns of the week after which the slowest of these tanks has forgotten how it began. */
const WEEKS = 6
/** Minutes: served to the second counts as served, and a week settles to 0.05 K, which moves the end of a shower by less. */
const SAME_MIN = 1

/** Minutes served of each draw of the last of several weeks on end: one simulation from a full tank, no cycle, nothing settled. */
function livedThrough(days: readonly UnitDay[], on: readonly MinuteInterval[]): readonly number[] {
  const [first] = days as [UnitDay]
  const draws: MixedDraw[] = days.flatMap(({ needs }, index) =>
    needs.flatMap((need) =>
      Array.from({ length: need.count }, (_, shower) => {
        const startMin = index * MIN_PER_DAY + need.readyByMin + shower * (need.minutesEach + need.gapMin)
        return { startMin, endMin: startMin + need.minutesEach, flowLPerMin: need.flowLPerMin, useTemperatureC: need.useTemperatureC }
      }),
    ),
  )
  const weekMin = days.length * MIN_PER_DAY
  const tank = tankModel(first.tank, first)
  let state: TankState = uniformState(first.tank.setPointC, 12)
  let servedMin: readonly number[] = []
  for (let week = 0; week < WEEKS; week++) {
    const run = simulate(tank, state, { startMin: 0, endMin: weekMin, on: on.flatMap((one) => around(one, weekMin)), draws })
    state = run.end
    servedMin = run.servedMin
  }
  return servedMin
}

/** A run before the week's first or after its last midnight belongs to the week's other end. */
const around = ({ startMin, endMin }: MinuteInterval, weekMin: number): readonly MinuteInterval[] =>
  [-weekMin, 0, weekMin]
    .map((by) => ({ startMin: startMin + by, endMin: endMin + by }))
    .filter((one) => one.endMin > 0 && one.startMin < weekMin)

/** Bare copper that cools by half in a night, so that the hour of a run decides. */
const BARE = { ...UNIT_TANK, nominalVolumeL: 105, loss: { kind: 'ua', lossWPerK: 9 } as const }

const toldRuns = (readiness: readonly Readiness[], durationMin: number): readonly MinuteInterval[] =>
  readiness.flatMap(({ needs }, index) =>
    needs.flatMap(({ startByMin }) =>
      startByMin === null ? [] : [{ startMin: index * MIN_PER_DAY + startByMin, endMin: index * MIN_PER_DAY + startByMin + durationMin }],
    ),
  )

const isReady = ({ status }: Readiness): boolean => status === 'ready' || status === 'no-need'

describe('a promise', () => {
  it('is kept when every run is started when told and lasts as long as can be counted on, whatever the week', () => {
    let [ready, short] = [0, 0]
    fc.assert(
      fc.property(weekArb, (days) => {
        const readiness = assessWeek(days)
        const { runs } = days[0] as UnitDay
        const lived = livedThrough(days, toldRuns(readiness, runs.kind === 'pressed' ? runs.guaranteedMin : 0))
        let draw = 0
        const told: readonly NeedOutcome[] = readiness.flatMap(({ needs }) => needs)
        for (const { need, minutesServed, status } of told) {
          let servedMin = 0
          for (let shower = 0; shower < need.count; shower++) servedMin += lived[draw++] ?? 0
          expect(Math.abs(servedMin - minutesServed)).toBeLessThanOrEqual(SAME_MIN * need.count)
          if (status === 'ready') ready++
          else short++
        }
      }),
      { numRuns: 50 },
    )
    expect(Math.min(ready, short)).toBeGreaterThan(100)
  })
  it('is made whenever runs that end alike would serve the whole week', () => {
    let serving = 0
    fc.assert(
      fc.property(weekArb, (days) => {
        if (!servesWeek(days)) return
        serving++
        expect(assessWeek(days).every(isReady)).toBe(true)
      }),
      { numRuns: 100 },
    )
    expect(serving).toBeGreaterThan(25)
  })
  it('names no other time of a shower that would not be promised there', () => {
    // A clock that is on from five to half past six: showers too late for it, or too early.
    const clock = { kind: 'clocked', onIntervals: [{ startMin: 300, endMin: 390 }], uncertaintyMin: 0 } as const
    let named = 0
    for (const readyByMin of [310, 330, 480, 510, 540, 600, 900]) {
      const days = Array.from({ length: 7 }, () => unitDay({ tank: BARE, runs: clock, needs: [showers({ readyByMin, count: 2 })] }))
      const [first] = assessWeek(days) as [Readiness]
      for (const movedTo of first.needs[0]?.nextBestReadyByMin ?? []) {
        named++
        const moved = days.map((day, index) => (index === 0 ? { ...day, needs: [{ ...day.needs[0]!, readyByMin: movedTo }] } : day))
        expect(assessWeek(moved)[0]?.status).toBe('ready')
      }
    }
    expect(named).toBeGreaterThan(3)
  })
})

describe('a clock that may be early or late', () => {
  const needs = [showers({ readyByMin: 420, count: 2 })]
  const clocked = (startMin: number, uncertaintyMin: number): UnitDay =>
    unitDay({ tank: BARE, needs, runs: { kind: 'clocked', onIntervals: [{ startMin, endMin: startMin + 70 }], uncertaintyMin } })

  it('is ready exactly when it is so with its hours as early and as late as they may be', () => {
    const seen = { ready: 0, short: 0 }
    for (let startMin = 250; startMin <= 470; startMin += 2) {
      const edges = [-5, 0, 5].map((by) => assessReadiness(clocked(startMin + by, 0)).status === 'ready')
      const ready = assessReadiness(clocked(startMin, 5)).status === 'ready'
      expect(ready).toBe(edges.every(Boolean))
      seen[ready ? 'ready' : 'short']++
    }
    expect(Math.min(seen.ready, seen.short)).toBeGreaterThan(5)
  })
})

describe('hours in which a tenant presses', () => {
  const evening: MinuteInterval = { startMin: 1_200, endMin: 1_320 }
  const morning: MinuteInterval = { startMin: 390, endMin: 480 }

  it('hold every start that is told, the evening before included', () => {
    fc.assert(
      fc.property(weekArb, fc.constantFrom([evening], [evening, morning], [morning]), (days, willing) => {
        for (const { needs } of assessWeek(days.map((day) => ({ ...day, willing }))))
          for (const { startByMin } of needs)
            if (startByMin !== null) {
              const minute = ((startByMin % MIN_PER_DAY) + MIN_PER_DAY) % MIN_PER_DAY
              expect(willing.some((hours) => hours.startMin <= minute && minute < hours.endMin)).toBe(true)
            }
      }),
      { numRuns: 25 },
    )
  })
  it('change nothing where they hold the start anyway, and are told as the reason where they are in the way', () => {
    const [free] = assessReadiness(unitDay()).needs as [NeedOutcome]
    const around = { startMin: (free.startByMin ?? 0) - 30, endMin: (free.startByMin ?? 0) + 30 }
    expect(assessReadiness(unitDay({ willing: [around] })).needs[0]?.startByMin).toBe(free.startByMin)
    const late = assessReadiness(
      unitDay({ tank: BARE, willing: [{ startMin: 415, endMin: 430 }], needs: [showers({ count: 2 })], runs: pressedFor(90) }),
    )
    expect(late.status).toBe('short')
    expect(late.needs[0]?.reason).toContain('hours')
  })
})

describe('a day that is an hour shorter or longer', () => {
  it('lets the tank cool for its own hours', () => {
    const tank = { ...UNIT_TANK, loss: { kind: 'ua', lossWPerK: 1.2 } as const }
    const nodesC = Array.from({ length: 12 }, () => 60)
    for (const lengthMin of [1_380, 1_440, 1_500]) {
      const [day] = assessWeek([unitDay({ tank, needs: [], lengthMin, start: { kind: 'nodes', nodesC }, runs: pressedFor(60) })]) as [
        Readiness,
      ]
      const cooled = simulate(
        tankModel(tank, { supplyVoltageV: 240, inletC: 15 }),
        { nodesC, upperCalls: true, lowerCalls: true },
        { startMin: 0, endMin: lengthMin, on: [], draws: [] },
      ).end.nodesC
      day.endNodesC.forEach((temperatureC, node) => expect(Math.abs(temperatureC - (cooled[node] ?? 0))).toBeLessThan(1e-6))
    }
  })
})

describe('chancesOf a run that outlasts the day', () => {
  it('is all or nothing where nothing is uncertain, as was told', () => {
    const nothing = { inletK: 0, voltageFraction: 0, flowFraction: 0, volumeFraction: 0 }
    let passing = 0
    fc.assert(
      fc.property(weekArb, (days) => {
        const readiness = assessWeek(days)
        chancesOf({ days, readiness, seed: 1, spread: nothing }).forEach((chance, day) =>
          chance?.readyFractionByNeed.forEach((fraction, need) => {
            const outcome = readiness[day]!.needs[need]!
            // A shower that is short or long by seconds may fall on either side of where the week has settled.
            if (Math.abs(outcome.minutesServed - outcome.minutesWanted) < SAME_MIN && outcome.status !== 'ready') return
            if ((outcome.runWindow?.endMin ?? 0) > outcome.need.readyByMin + 120) passing++
            expect(fraction).toBe(outcome.status === 'ready' ? 1 : 0)
          }),
        )
      }),
      { numRuns: 25 },
    )
    expect(passing).toBeGreaterThan(20)
  })
})

describe('the year of a clock that does not follow the clock change', () => {
  const climate: InletClimate = { kind: 'months', inletC: Array.from({ length: 12 }, () => 16) }
  const clocked = (startMin: number): readonly UnitDay[] =>
    Array.from({ length: 7 }, () =>
      unitDay({
        tank: BARE,
        needs: [showers({ readyByMin: 420, count: 2 })],
        runs: { kind: 'clocked', onIntervals: [{ startMin, endMin: startMin + 70 }], uncertaintyMin: 0 },
      }),
    )
  const spans = [{ from: '2026-10-25', to: '2027-03-28' }]

  it('is short from the change on for as long as it runs an hour late, and else not', () => {
    const outlook = seasonOutlook({ days: clocked(350), otherClock: { days: clocked(410), spans }, climate, fromDay: '2026-07-01' })
    expect(outlook.status).toBe('part')
    expect(outlook.spells).toEqual([{ firstDay: '2026-10-25', lastDay: '2027-03-27', days: 154 }])
    expect([outlook.limit.kind, outlook.afterChange?.kind]).toEqual(['always', 'never'])
  })
})

describe('the required run', () => {
  /** Every length to the half minute, at every end that the search knows. */
  const bruteForce = (day: UnitDay): number | null => {
    for (let minutes = 0; minutes <= 240; minutes += 0.5) if (servesWeek([{ ...day, runs: pressedFor(minutes) }])) return minutes
    return null
  }
  it('is the shortest that any length and end would give, for one need a day, to the two minutes in which ends are not told apart', () => {
    for (const need of [
      {},
      { count: 3 },
      { count: 4, minutesEach: 12 },
      { flowLPerMin: 12, minutesEach: 15 },
    ] satisfies Partial<ShowerNeed>[])
      for (const setPointC of [50, 60]) {
        const day = unitDay({ needs: [showers(need)], tank: { ...UNIT_TANK, setPointC } })
        const shortest = bruteForce(day)
        const told = assessReadiness(day).needs[0]?.requiredRunMin ?? null
        if (shortest === null || told === null) expect(told === null || told > 240).toBe(shortest === null)
        else expect(told - shortest).toBeLessThanOrEqual(4)
        if (shortest !== null && told !== null) expect(told).toBeGreaterThanOrEqual(shortest)
      }
  })
})
