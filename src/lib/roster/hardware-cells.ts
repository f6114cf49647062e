/** An installation as the roster's cells write it; the import holds a cell against these to see whether it says anything new. */
import type { CapacitorLeakage, Controller } from '#lib/core/controller/types.ts'
import type { Circuit, Installation } from '#lib/core/hardware/types.ts'
import type { LossRating } from '#lib/core/tank/types.ts'
import type { ColumnName } from './columns.ts'
import { formatProgramme } from './programme-text.ts'

export type HardwareCells = Partial<Record<ColumnName, string>>

export const CONTROLLER_WORDS = {
  dial: 'dial',
  'one-shot-fixed': 'one-shot',
  'one-shot-rc': 'rc',
  'time-switch': 'switch',
  'supplier-contactor': 'supplier',
} as const satisfies Record<Controller['kind'], string>

/** The columns that belong to one kind of controller each. */
export const CONTROLLER_COLUMNS: Readonly<Record<Controller['kind'], readonly ColumnName[]>> = {
  dial: ['minutes', 'tolerance_pct'],
  'one-shot-fixed': ['minutes', 'tolerance_pct'],
  'one-shot-rc': ['r_megohm', 'r_tolerance_pct', 'c_microfarad', 'c_tolerance_pct', 'leakage', 'timer_ic', 'timer_v'],
  'time-switch': ['programme'],
  'supplier-contactor': ['programme'],
}

const figure = (value: number): string => String(Number(value.toPrecision(7)))
const percent = (fraction: number): string => figure(fraction * 100)

export function hardwareCells({ load, controller, circuit }: Installation): HardwareCells {
  const { tank } = load
  return {
    litres: figure(tank.nominalVolumeL),
    lower_w: String(tank.lowerElement?.ratedPowerW ?? ''),
    upper_w: String(tank.upperElement?.ratedPowerW ?? ''),
    element_v: String((tank.lowerElement ?? tank.upperElement)?.ratedVoltageV ?? ''),
    set_point_c: String(tank.setPointC),
    mixing_valve_c: String(tank.mixingValveC ?? ''),
    loss: lossText(tank.loss),
    breaker_a: String(circuit.breakerA ?? ''),
    conductor: conductorText(circuit.conductor),
    contact_a: String(circuit.contactRatingA ?? ''),
    controller: CONTROLLER_WORDS[controller.kind],
    ...controllerCells(controller),
  }
}

function controllerCells(controller: Controller): HardwareCells {
  switch (controller.kind) {
    case 'dial':
    case 'one-shot-fixed':
      return { minutes: String(controller.settingMin), tolerance_pct: percent(controller.toleranceFraction) }
    case 'one-shot-rc':
      return {
        r_megohm: figure(controller.resistanceOhm / 1e6),
        r_tolerance_pct: percent(controller.resistanceToleranceFraction),
        c_microfarad: figure(controller.capacitanceF * 1e6),
        c_tolerance_pct: percent(controller.capacitanceToleranceFraction),
        leakage: leakageText(controller.leakage),
        timer_ic: controller.icFamily,
        timer_v: String(controller.supplyV),
      }
    case 'time-switch':
      return { programme: formatProgramme(controller.programme) }
    case 'supplier-contactor':
      return { programme: formatProgramme(controller.windows) }
  }
}

function leakageText(leakage: CapacitorLeakage): string {
  switch (leakage.kind) {
    case 'resistance':
      return `${figure(leakage.leakageOhm / 1e6)} megohm`
    case 'current':
      return `${figure(leakage.leakageA * 1e6)} ua`
    case 'series':
      return `${leakage.series} ${leakage.ratedV} v`
    case 'unknown':
      return ''
  }
}

const conductorText = (conductor: Circuit['conductor']): string =>
  conductor ? `${conductor.size} ${conductor.system}${conductor.material === 'aluminium' ? ' aluminium' : ''}` : ''

function lossText(loss: LossRating): string {
  switch (loss.kind) {
    case 'ua':
      return `${loss.lossWPerK} w/k`
    case 'uef':
      return `uef ${loss.uef}`
    case 'ef':
      return `ef ${loss.ef}`
    case 'class':
      return `class ${loss.label}`
    case 'kwh-per-day':
      return `${loss.lossKwhPerDay} kwh`
  }
}
