/**
 * After an outage everybody is cold at once: each unit's minutes from cold to its set point as the load of the restart roster, and
 * the roster's slots as instants. A unit's timer may have to be pressed more than once. Pure.
 */
import type { UnitId } from '#db/ids.ts'
import { restartRoster } from '#lib/core/plan/restart-roster.ts'
import { actualVolumeL, tankModel, tankPowerW } from '#lib/core/tank/model.ts'
import { simulate, uniformState } from '#lib/core/tank/simulate.ts'
import { NODES } from '#lib/core/tank/defaults.ts'
import type { Installation } from '#lib/core/hardware/types.ts'
import type { DurationOutcome } from '#lib/core/controller/types.ts'
import { MS_PER_MIN } from '#lib/core/units.ts'

export interface RestartUnit {
  readonly unitId: UnitId
  readonly code: string
  readonly installation: Installation
  readonly duration: DurationOutcome
}
export interface RestartCase {
  readonly units: readonly RestartUnit[]
  readonly supplyVoltageV: number
  readonly inletC: number
  readonly limitW: number
  readonly baseLoadW: number
  readonly backAtMs: number
}

export interface RestartLine {
  readonly order: number
  readonly code: string
  readonly startsAtMs: number
  /** Surely hot from here on. */
  readonly readyAtMs: number
  readonly powerW: number
  readonly how: 'press' | 'switch' | 'supplier'
  /** Further presses of a timer that ends before the tank is hot. */
  readonly againAtMs: readonly number[]
  readonly mayNeverStop: boolean
}
export interface RestartPage {
  readonly lines: readonly RestartLine[]
  readonly lastReadyAtMs: number
  /** No order of the same units is done earlier. */
  readonly lastReadyAtLeastMs: number
  readonly without: readonly { readonly code: string; readonly why: string }[]
}

const SLOT_MIN = 15
/** How late a hand may be, as in a plan. */
const HAND_MIN = 5
/** A tank that is not hot after a day has no element that could. */
const MOST_MIN = 1_440
const LONGEST_H = 96

/** From mains-cold water to the moment the lower thermostat is satisfied; `null` when it never is. */
export function coldToHotMin({ installation }: RestartUnit, site: Pick<RestartCase, 'supplyVoltageV' | 'inletC'>): number | null {
  const { tank } = installation.load
  if (actualVolumeL(tank) <= 0 || tankPowerW(tank, site.supplyVoltageV) <= 0) return null
  const programme = { startMin: 0, endMin: MOST_MIN, on: [{ startMin: 0, endMin: MOST_MIN }], draws: [] }
  const { heating } = simulate(tankModel(tank, site), uniformState(site.inletC, NODES), programme)
  const first = heating[0]
  return first && first.endMin < MOST_MIN ? first.endMin : null
}

export function restartPage(asked: RestartCase): RestartPage | null {
  const minutes = new Map(asked.units.map((unit) => [unit.unitId, coldToHotMin(unit, asked)]))
  const powerOf = (unit: RestartUnit) => tankPowerW(unit.installation.load.tank, asked.supplyVoltageV)
  const able = asked.units.filter((unit) => minutes.get(unit.unitId) !== null)
  const slots = (LONGEST_H * 60) / SLOT_MIN
  const outcome = restartRoster({
    slotMin: SLOT_MIN,
    slots,
    units: able.map((unit) => ({
      unitId: unit.unitId,
      powerKw: powerOf(unit) / 1_000,
      limitKw: [powerOf(unit) / 1_000],
      worstSlots: Math.ceil(((minutes.get(unit.unitId) ?? 0) + HAND_MIN) / SLOT_MIN),
    })),
    limits: [{ id: 'service', limitKw: asked.limitW / 1_000, baseKw: new Array<number>(slots).fill(asked.baseLoadW / 1_000) }],
    seed: 1,
  })
  if (outcome.status !== 'rostered') return null
  const at = (slot: number) => asked.backAtMs + slot * SLOT_MIN * MS_PER_MIN
  const byId = new Map<string, RestartUnit>(able.map((unit) => [unit.unitId, unit]))
  return {
    lines: outcome.lines.flatMap(({ order, unitId, startSlot, readySlot }): RestartLine[] => {
      const unit = byId.get(unitId)
      if (!unit) return []
      const handled = handling(unit, { startsAtMs: at(startSlot), hotMin: minutes.get(unit.unitId) ?? 0 })
      return [{ order, code: unit.code, startsAtMs: at(startSlot), readyAtMs: at(readySlot), powerW: powerOf(unit), ...handled }]
    }),
    lastReadyAtMs: at(outcome.lastReadySlot),
    lastReadyAtLeastMs: at(outcome.lastReadyAtLeastSlot),
    without: [
      ...outcome.unserved.map(({ unitId }) => ({
        code: byId.get(unitId)?.code ?? '',
        why: 'passes the limit even alone: start it when nothing else runs, or raise the limit',
      })),
      ...asked.units
        .filter((unit) => !able.includes(unit))
        .map(({ code }) => ({ code, why: 'its record has no element that would make it hot' })),
    ],
  }
}

type Handling = Pick<RestartLine, 'how' | 'againAtMs' | 'mayNeverStop'>

function handling(
  { installation, duration }: RestartUnit,
  { startsAtMs, hotMin }: { readonly startsAtMs: number; readonly hotMin: number },
): Handling {
  const { kind } = installation.controller
  if (kind === 'time-switch') return { how: 'switch', againAtMs: [], mayNeverStop: false }
  if (kind === 'supplier-contactor') return { how: 'supplier', againAtMs: [], mayNeverStop: false }
  const { guaranteed, typical, timesOut } = duration
  const againAtMs: number[] = []
  // Heat comes from the run that can be counted on; it has surely stopped once its longest is over.
  const stopsMin = typical.maxMin ?? guaranteed.minMin
  for (let press = 1; guaranteed.minMin > 0 && press * guaranteed.minMin < hotMin && press * stopsMin < hotMin; press++)
    againAtMs.push(startsAtMs + Math.ceil(press * stopsMin) * MS_PER_MIN)
  return { how: 'press', againAtMs, mayNeverStop: timesOut !== 'always' }
}
