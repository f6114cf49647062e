/** A family of planning problems: buildings of any size, made from a seed; rooms to spare, tight or too small. */
import type { Need, NeededRun, PlanProblem } from '#lib/core/plan/types.ts'
import { seededRandom } from '#lib/core/plan/random.ts'

export type Service = 'slack' | 'tight' | 'over-full'
export type Periods = 'flat' | 'two-period' | 'three-period'

export interface Member {
  readonly units: number
  readonly service: Service
  readonly periods: Periods
  readonly demand: boolean
}

const SLOT_MIN = 5
const SLOTS = 288
const at = (hour: number) => Math.round((hour * 60) / SLOT_MIN)
/** Room for runs as a multiple of what the busiest four hours of the morning would load if spread evenly over them. */
const ROOM = { slack: 3, tight: 1.12, 'over-full': 0.4 } as const

export function familyProblem({ units, service, periods, demand }: Member, seed: number): PlanProblem {
  const random = seededRandom(seed * 7_919 + units)
  const pick = <T>(items: readonly T[]): T => items[Math.floor(random() * items.length)]!
  const needs: Need[] = []
  for (let unit = 0; unit < units; unit++) {
    const powerKw = pick([3, 3.8, 4.5, 5.5])
    const starter = pick(['hand', 'switch', 'free'] as const)
    const isPressedTwice = random() < 0.05
    const when = random()
    const hours = when < 0.6 ? [5.5 + random() * 3] : when < 0.8 ? [17.5 + random() * 4] : [5.5 + random() * 3, 17.5 + random() * 4]
    for (const hour of hours) {
      const expectedMin = Math.round(35 + random() * 40)
      const readyBySlot = at(hour)
      const hoursBefore = 3 + random() * 3
      const worstSlots = Math.ceil((expectedMin * 1.1) / SLOT_MIN)
      const run = (order: number, of: number): NeededRun => ({
        id: `u${unit}-${hour.toFixed(2)}-${order}`,
        powerKw,
        limitKw: [powerKw],
        worstSlots,
        expectedMin,
        startWindows: starter === 'hand' ? [{ from: at(4.5), to: at(23) }] : [{ from: 0, to: SLOTS }],
        earliestStartSlot: readyBySlot - at(hoursBefore) - worstSlots * of,
        latestStartSlot: readyBySlot - worstSlots * (of - order),
        startStep: starter === 'switch' ? 3 : 1,
        startOffset: 0,
        readyBySlot,
        standingLossMinorPerH: 0.6 + random() * 0.8,
        habitSlot: random() < 0.3 ? readyBySlot - worstSlots - Math.floor(random() * 12) : null,
        pinnedSlot: null,
        shortestWorstSlots: Math.max(1, worstSlots - 3),
      })
      needs.push({ id: `u${unit}-${hour.toFixed(2)}`, unitId: `u${unit}`, runs: isPressedTwice ? [run(0, 2), run(1, 2)] : [run(0, 1)] })
    }
  }
  const baseKw = Array.from({ length: SLOTS }, (_, slot) => {
    const hour = (slot * SLOT_MIN) / 60
    const bump = Math.exp(-((hour - 7.5) ** 2) / 3) + 1.4 * Math.exp(-((hour - 19) ** 2) / 5)
    return Math.round(units * (0.25 + 0.35 * bump) * 1000) / 1000
  })
  const morning = needs.flatMap(({ runs }) => runs).filter(({ readyBySlot }) => readyBySlot < at(12))
  const evenKw = morning.reduce((sum, { powerKw, worstSlots }) => sum + powerKw * worstSlots, 0) / at(4)
  const limitKw = Math.round(Math.max(...baseKw.slice(at(4), at(9))) + Math.max(8, ROOM[service] * evenKw))
  const price = { flat: () => 15, 'two-period': twoPeriods, 'three-period': threePeriods }[periods]
  return {
    slotMin: SLOT_MIN,
    slots: SLOTS,
    needs,
    limits: [{ id: 'service', limitKw, baseKw }],
    energyPriceMinorPerKwh: Array.from({ length: SLOTS }, (_, slot) => price((slot * SLOT_MIN) / 60)),
    baseKw,
    // A monthly charge of 12.00 and 9.00 a kilowatt, spread over 30 days.
    demand: demand
      ? [
          { id: 'any time', priceMinorPerKw: 40, alreadyKw: 0, windows: quarters(0, SLOTS) },
          { id: 'peak', priceMinorPerKw: 30, alreadyKw: 0, windows: [...quarters(at(6), at(9)), ...quarters(at(17), at(21))] },
        ]
      : [],
    weights: { standingLoss: 1, habitMinorPerH: 0.5, evennessMinorPerKw: 0 },
  }
}

const twoPeriods = (hour: number) => (hour < 7 || hour >= 23 ? 9 : 18)
const threePeriods = (hour: number) => (hour < 6 || hour >= 22 ? 8 : (hour >= 7 && hour < 9) || (hour >= 17 && hour < 21) ? 31 : 15)
const quarters = (from: number, to: number) =>
  Array.from({ length: (to - from) / 3 }, (_, place) => ({ from: from + 3 * place, to: from + 3 * place + 3 }))
