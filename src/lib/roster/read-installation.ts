/**
 * The hardware of one roster row. For a unit already on record a cell changes what it says and leaves the rest, so that a table
 * never wipes what an electrician found; for a new unit an open cell gets a default that is named, or stays not known.
 */
import type { Circuit, Installation } from '#lib/core/hardware/types.ts'
import type { HeatingElement, LossRating, TankSpec } from '#lib/core/tank/types.ts'
import { lFromUsGal, usGalFromL } from '#lib/core/units.ts'
import { DEFAULT_LOSS, DEFAULT_TANK, unknownCircuit } from '#lib/hardware/defaults.ts'
import { ELEMENT_POWER_W, SET_POINT_C, SUPPLY_V, TANK_VOLUME_L } from '#lib/hardware/schemas.ts'
import type { CellReader } from './cells.ts'
import type { ColumnName } from './columns.ts'
import { CONTROLLER_COLUMNS, hardwareCells, type HardwareCells } from './hardware-cells.ts'
import { readController } from './read-controller.ts'
import { type HardwareContext, named, type RowHardware } from './row-hardware.ts'

const TANK_COLUMNS: readonly ColumnName[] = [
  'litres',
  'gallons',
  'lower_w',
  'upper_w',
  'element_v',
  'set_point_c',
  'mixing_valve_c',
  'loss',
]
const CIRCUIT_COLUMNS: readonly ColumnName[] = ['breaker_a', 'conductor', 'contact_a']
const HARDWARE_COLUMNS = [
  ...new Set([...TANK_COLUMNS, ...CIRCUIT_COLUMNS, 'controller' as const, ...Object.values(CONTROLLER_COLUMNS).flat()]),
]

/** `null` when the row says nothing new about hardware. */
export function readInstallation(cell: CellReader, context: HardwareContext): Installation | null {
  const { before } = context
  const recorded: HardwareCells = before ? { ...hardwareCells(before), gallons: gallonsText(before.load.tank.nominalVolumeL) } : {}
  if (!HARDWARE_COLUMNS.some((column) => cell.says(column, recorded[column]))) return null
  const row: RowHardware = { ...context, cell, recorded }
  const controller = readController(row)
  if (!controller) return null
  return { load: { kind: 'storage-heater', tank: readTank(row) }, controller, circuit: readCircuit(row) }
}

const roundedL = (volumeL: number): number => Math.round(volumeL * 10) / 10
const gallonsText = (volumeL: number): string => String(Math.round(usGalFromL(volumeL) * 10) / 10)

function readTank(row: RowHardware): TankSpec {
  const { cell, before, recorded, supplyVoltageV, defaults } = row
  const known = before?.load.tank
  const volts =
    cell.number('element_v', SUPPLY_V) ??
    (known?.lowerElement ?? known?.upperElement)?.ratedVoltageV ??
    named(defaults, `element ${supplyVoltageV} V`, supplyVoltageV)
  const element = (column: 'lower_w' | 'upper_w', old: HeatingElement | null | undefined): HeatingElement | null => {
    const ratedPowerW = cell.number(column, ELEMENT_POWER_W) ?? old?.ratedPowerW ?? null
    return ratedPowerW === null
      ? null
      : { ratedPowerW, ratedVoltageV: cell.says('element_v', recorded.element_v) ? volts : (old?.ratedVoltageV ?? volts) }
  }
  const upperElement = element('upper_w', known?.upperElement)
  const volumeL = readVolume(row)
  const share = DEFAULT_TANK.shareAboveUpperFraction
  return {
    ...(known ?? { ...DEFAULT_TANK, heightM: null, mixingValveC: null }),
    nominalVolumeL: volumeL ?? known?.nominalVolumeL ?? 0,
    // Another tank has another content.
    actualVolumeL: volumeL === null ? (known?.actualVolumeL ?? null) : null,
    loss: readLoss(row),
    upperElement,
    lowerElement: element('lower_w', known?.lowerElement),
    shareAboveUpperFraction:
      known?.shareAboveUpperFraction ?? (upperElement ? named(defaults, 'a third of the tank above the upper element', share) : share),
    setPointC:
      cell.number('set_point_c', SET_POINT_C) ??
      known?.setPointC ??
      named(defaults, `set point ${DEFAULT_TANK.setPointC} °C`, DEFAULT_TANK.setPointC),
    mixingValveC: cell.number('mixing_valve_c', { min: 30, max: 65 }) ?? known?.mixingValveC ?? null,
  }
}

/** `null` when the volume is the recorded one. */
function readVolume({ cell, before, recorded }: RowHardware): number | null {
  const litres = cell.number('litres', TANK_VOLUME_L)
  const gallons = cell.number('gallons', { min: 1, max: 530 })
  if (litres === null && gallons === null && !before && cell.text('litres') === '' && cell.text('gallons') === '')
    cell.problem('litres', 'Enter the tank’s nominal volume in litres or gallons.')
  if (litres !== null && gallons !== null && Math.abs(lFromUsGal(gallons) - litres) > 0.05 * litres)
    cell.problem('gallons', `This is ${Math.round(lFromUsGal(gallons))} litres, and the litres say ${litres}. Keep one of them.`)
  if (litres !== null && cell.says('litres', recorded.litres)) return litres
  return gallons !== null && litres === null && cell.says('gallons', recorded.gallons) ? roundedL(lFromUsGal(gallons)) : null
}

function readLoss({ cell, before, recorded, defaults }: RowHardware): LossRating {
  const known = before?.load.tank.loss
  if (!cell.says('loss', recorded.loss)) return known ?? named(defaults, 'standing loss of class C', DEFAULT_LOSS)
  const text = cell.text('loss').toLowerCase().replace(',', '.')
  const label = (['A+', 'A', 'B', 'C', 'D', 'E', 'F'] as const).find((one) => text === `class ${one.toLowerCase()}`)
  if (label) return { kind: 'class', label }
  const [, word, digits, unit] = /^(uef|ef)?\s*(\d+(?:\.\d+)?)\s*(kwh|w\/k)?$/.exec(text) ?? []
  const value = Number(digits)
  if (word === 'uef' && !unit) return { kind: 'uef', uef: value, drawPattern: 'medium' }
  if (word === 'ef' && !unit) return { kind: 'ef', ef: value }
  if (!word && unit === 'kwh') return { kind: 'kwh-per-day', lossKwhPerDay: value, testDeltaK: 45 }
  if (!word && unit === 'w/k') return { kind: 'ua', lossWPerK: value }
  cell.problem('loss', 'Write uef 0.92, ef 0.90, class C, 1.8 kwh or 1.3 w/k.')
  return known ?? DEFAULT_LOSS
}

function readCircuit(row: RowHardware): Circuit {
  const { cell, before, supplyVoltageV } = row
  const known = before?.circuit ?? unknownCircuit(supplyVoltageV)
  const contactRatingA = cell.number('contact_a', { min: 0.5, max: 400 }) ?? known.contactRatingA
  return {
    ...known,
    breakerA: cell.number('breaker_a', { min: 1, max: 400 }) ?? known.breakerA,
    conductor: readConductor(row, known.conductor),
    contactRatingA,
    contactRatingClass: contactRatingA === null ? null : (known.contactRatingClass ?? 'resistive'),
  }
}

function readConductor({ cell, recorded }: RowHardware, known: Circuit['conductor']): Circuit['conductor'] {
  if (!cell.says('conductor', recorded.conductor)) return known
  const text = cell.text('conductor').toLowerCase().replace(',', '.').replace('mm²', 'mm2')
  const [, size, system, metal] = /^(\d+(?:\.\d+)?|\d\/0)\s*(awg|mm2)(?:\s+(copper|aluminium|aluminum))?$/.exec(text) ?? []
  if (!size || (system !== 'awg' && system !== 'mm2')) {
    cell.problem('conductor', 'Write 10 awg or 2.5 mm2, and aluminium behind it where it is not copper.')
    return known
  }
  // The lowest usual rating of insulation and terminals in each system: the safe side.
  return { size, system, material: metal?.startsWith('alu') ? 'aluminium' : 'copper', ratingC: system === 'awg' ? 60 : 70 }
}
