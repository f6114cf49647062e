/** How fast the tank model is: certification days with two power windows beside a plain one-second Euler loop, and a unit's whole week. */
import { chancesOf } from '#lib/core/tank/chance.ts'
import { tankModel } from '#lib/core/tank/model.ts'
import { seasonOutlook } from '#lib/core/tank/outlook.ts'
import { type Programme, simulate, type TankState, uniformState } from '#lib/core/tank/simulate.ts'
import { assessWeek } from '#lib/core/tank/week.ts'
import { CERTIFICATION_C } from '../fixtures/tank/certification.data.ts'
import { certificationDraws, certificationTank } from '../support/certification-day.ts'
import { eulerDay } from '../support/euler-tank.ts'
import { showers, unitDay } from '../support/tank-cases.ts'

const DAYS = 4_000
const EULER_DAYS = 20
const ROUNDS = 7
const UNIT_WEEKS = 40

const tank = tankModel(
  { ...certificationTank(1.313), shareBelowLowerFraction: 1 / 6 },
  { supplyVoltageV: 240, inletC: CERTIFICATION_C.inletC },
)
/** The medium pattern from seven in the morning; on 05:30 to 08:30 and 16:30 to 19:30. */
const day: Programme = {
  startMin: 0,
  endMin: 1_440,
  on: [
    { startMin: 330, endMin: 510 },
    { startMin: 990, endMin: 1_170 },
  ],
  draws: certificationDraws('medium', 420).filter((draw) => draw.startMin < 1_440),
}

export function benchTank(): { label: string; value: number; unit: string }[] {
  const ratesPerS: number[] = []
  const rivalPerS: number[] = []
  for (let round = 0; round < ROUNDS; round++) {
    ratesPerS.push(daysPerS(DAYS, (state) => simulate(tank, state, day).end))
    rivalPerS.push(
      daysPerS(EULER_DAYS, (state) => ({ nodesC: [...eulerDay(tank, state, day).nodesC], upperCalls: true, lowerCalls: true })),
    )
  }
  const [rate, rival] = [middle(ratesPerS), middle(rivalPerS)]
  return [
    { label: 'certification days, two power windows, 12 nodes', value: rate, unit: 'a core second' },
    { label: 'the same by a plain one-second Euler loop', value: rival, unit: 'a core second' },
    { label: 'event by event against the loop, ratio', value: rate / rival, unit: 'times' },
    ...weekFigures(),
  ]
}

function daysPerS(days: number, next: (state: TankState) => TankState): number {
  let state = uniformState(CERTIFICATION_C.setPointC, 12)
  const begunAtMs = coreMs()
  for (let index = 0; index < days; index++) state = next(state)
  return days / ((coreMs() - begunAtMs) / 1_000)
}

/** Time of this process on a core, whatever else the machine does. */
function coreMs(): number {
  const { user, system } = process.cpuUsage()
  return (user + system) / 1_000
}

const middle = (values: readonly number[]): number => [...values].sort((one, other) => one - other)[(values.length - 1) / 2] ?? 0

/** Each week is another unit's: its mains and its timer differ, so nothing is remembered. */
function weekFigures() {
  const parts = { week: [] as number[], chance: [] as number[], outlook: [] as number[] }
  for (let unit = 0; unit < UNIT_WEEKS; unit++) {
    const days = Array.from({ length: 7 }, (_, index) =>
      unitDay({
        inletC: 8 + (unit % 20) * 0.5,
        needs: index < 5 ? [showers({ count: 1 + (unit % 3) }), showers({ readyByMin: 1_140 })] : [showers({ readyByMin: 540 })],
        runs: { kind: 'pressed', guaranteedMin: 40 + unit, expectedMin: 45 + unit, longestMin: 55 + unit },
      }),
    )
    const atMs = [coreMs()]
    const week = assessWeek(days)
    atMs.push(coreMs())
    chancesOf({ days, readiness: week, seed: unit })
    atMs.push(coreMs())
    seasonOutlook({
      days,
      otherClock: null,
      climate: { kind: 'climate', meanAirC: 10, swingAirK: 25, hemisphere: 'north' },
      fromDay: '2026-07-01',
    })
    atMs.push(coreMs())
    parts.week.push(atMs[1]! - atMs[0]!)
    parts.chance.push(atMs[2]! - atMs[1]!)
    parts.outlook.push(atMs[3]! - atMs[2]!)
  }
  const mean = (values: readonly number[]) => values.reduce((sum, value) => sum + value, 0) / values.length
  const [week, chance, outlook] = [mean(parts.week), mean(parts.chance), mean(parts.outlook)]
  return [
    { label: 'a unit’s week: periodic state, required run, start-by', value: week, unit: 'ms' },
    { label: 'its chance of each morning', value: chance, unit: 'ms' },
    { label: 'its outlook over the year', value: outlook, unit: 'ms' },
    { label: 'all of a unit’s weekly evaluation', value: week + chance + outlook, unit: 'ms' },
  ]
}
