/** The hardware of one roster row; what the table leaves open gets a default that is named, or stays not known. */
import type { Controller } from '#lib/core/controller/types.ts'
import type { Circuit, Installation } from '#lib/core/hardware/types.ts'
import { SHARE_ABOVE_UPPER_FRACTION } from '#lib/core/tank/defaults.ts'
import type { LossRating, TankSpec } from '#lib/core/tank/types.ts'
import { lFromUsGal } from '#lib/core/units.ts'
import { ELEMENT_POWER_W, RUN_MIN, SET_POINT_C, SUPPLY_V, TANK_VOLUME_L } from '#lib/hardware/schemas.ts'
import type { CellReader } from './cells.ts'
import { parseProgramme } from './programme-text.ts'

/** Rubber-stamped tolerances where the table has none: common practice, no source. */
const DEFAULT_TOLERANCE = { dial: 0.1, fixed: 0.05, resistor: 0.05, capacitor: 0.2 } as const
const DEFAULT_SET_POINT_C = 60
const DEFAULT_DEAD_BAND_K = 5.5
const DEFAULT_AMBIENT_C = 20
const DEFAULT_TIMER_SUPPLY_V = 12

interface Context {
  readonly supplyVoltageV: number
}

export function readInstallation(cell: CellReader, { supplyVoltageV }: Context, defaults: string[]): Installation | null {
  const kind = cell.text('controller').toLowerCase()
  const litres = cell.number('litres', TANK_VOLUME_L) ?? gallons(cell)
  if (kind === '' && litres === null && cell.text('lower_w') === '') return null
  if (litres === null) cell.problem('litres', 'Enter the tank’s nominal volume in litres or gallons.')
  const controller = readController(cell, kind, defaults)
  if (!controller) return null
  return {
    load: { kind: 'storage-heater', tank: readTank(cell, { litres: litres ?? 0, supplyVoltageV, defaults }) },
    controller,
    circuit: readCircuit(cell, supplyVoltageV),
  }
}

function gallons(cell: CellReader): number | null {
  const value = cell.number('gallons', { min: 1, max: 530 })
  return value === null ? null : Math.round(lFromUsGal(value) * 10) / 10
}

interface TankContext extends Context {
  readonly litres: number
  readonly defaults: string[]
}

function readTank(cell: CellReader, { litres, supplyVoltageV, defaults }: TankContext): TankSpec {
  const volts = cell.number('element_v', SUPPLY_V) ?? defaulted(defaults, `element ${supplyVoltageV} V`, supplyVoltageV)
  const element = (watts: number | null) => (watts === null ? null : { ratedPowerW: watts, ratedVoltageV: volts })
  const lower = element(cell.number('lower_w', ELEMENT_POWER_W))
  const upper = element(cell.number('upper_w', ELEMENT_POWER_W))
  return {
    nominalVolumeL: litres,
    actualVolumeL: null,
    heightM: null,
    loss: readLoss(cell, defaults),
    upperElement: upper,
    lowerElement: lower,
    shareAboveUpperFraction: upper
      ? defaulted(defaults, 'a third of the tank above the upper element', SHARE_ABOVE_UPPER_FRACTION)
      : SHARE_ABOVE_UPPER_FRACTION,
    setPointC: cell.number('set_point_c', SET_POINT_C) ?? defaulted(defaults, `set point ${DEFAULT_SET_POINT_C} °C`, DEFAULT_SET_POINT_C),
    deadBandK: DEFAULT_DEAD_BAND_K,
    ambientC: DEFAULT_AMBIENT_C,
    mixingValveC: cell.number('mixing_valve_c', { min: 30, max: 65 }),
  }
}

function readLoss(cell: CellReader, defaults: string[]): LossRating {
  const text = cell.text('loss').toLowerCase().replace(',', '.')
  const fallback: LossRating = { kind: 'class', label: 'C' }
  if (text === '') return defaulted(defaults, 'standing loss of class C', fallback)
  const label = /^class\s*(a\+|[a-f])$/.exec(text)?.[1]?.toUpperCase()
  if (label) return { kind: 'class', label: label as 'C' }
  const [, word, figure, unit] = /^(uef|ef)?\s*(\d+(?:\.\d+)?)\s*(kwh|w\/k)?$/.exec(text) ?? []
  const value = Number(figure)
  if (word === 'uef') return { kind: 'uef', uef: value, drawPattern: 'medium' }
  if (word === 'ef') return { kind: 'ef', ef: value }
  if (unit === 'kwh') return { kind: 'kwh-per-day', lossKwhPerDay: value, testDeltaK: 45 }
  if (unit === 'w/k') return { kind: 'ua', lossWPerK: value }
  cell.problem('loss', 'Write uef 0.92, ef 0.90, class C, 1.8 kwh or 1.3 w/k.')
  return fallback
}

function readController(cell: CellReader, kind: string, defaults: string[]): Controller | null {
  switch (kind) {
    case 'dial': {
      const settingMin = run(cell)
      defaults.push(`dial tolerance ${DEFAULT_TOLERANCE.dial * 100} %`)
      return { kind: 'dial', settingMin, scaleMaxMin: Math.max(120, settingMin), toleranceFraction: DEFAULT_TOLERANCE.dial }
    }
    case 'one-shot':
      defaults.push(`one-shot tolerance ${DEFAULT_TOLERANCE.fixed * 100} %`)
      return { kind: 'one-shot-fixed', settingMin: run(cell), toleranceFraction: DEFAULT_TOLERANCE.fixed }
    case 'rc':
      return readRc(cell, defaults)
    case 'switch':
    case 'supplier': {
      const programme = parseProgramme(cell.text('programme'))
      if (!programme.ok) cell.problem('programme', programme.message)
      const steps = programme.ok ? programme.value : []
      if (kind === 'supplier') return { kind: 'supplier-contactor', windows: steps }
      defaults.push('a switch that does not follow the clock change')
      return { kind: 'time-switch', stepMin: 15, programme: steps, followsClockChange: false, driftMin: 0, powerReserveH: null }
    }
    default:
      cell.problem('controller', 'Choose dial, one-shot, rc, switch or supplier.')
      return null
  }
}

function run(cell: CellReader): number {
  const minutes = cell.number('minutes', RUN_MIN)
  if (minutes === null && cell.text('minutes') === '') cell.problem('minutes', 'Enter the minutes of one run.')
  return minutes ?? 1
}

function readRc(cell: CellReader, defaults: string[]): Controller {
  const megohm = cell.number('r_megohm', { min: 0.001, max: 1_000 })
  const microfarad = cell.number('c_microfarad', { min: 0.001, max: 100_000 })
  if (megohm === null) cell.problem('r_megohm', 'Enter the timing resistor in megohm.')
  if (microfarad === null) cell.problem('c_microfarad', 'Enter the timing capacitor in microfarad.')
  const family = cell.text('timer_ic').toLowerCase()
  if (family !== 'bipolar' && family !== 'cmos')
    cell.problem('timer_ic', 'Write bipolar or cmos: it is printed on the chip (TLC, ICM, TS and LMC are CMOS).')
  defaults.push(
    `resistor ${DEFAULT_TOLERANCE.resistor * 100} %, capacitor ${DEFAULT_TOLERANCE.capacitor * 100} %, supply ${DEFAULT_TIMER_SUPPLY_V} V, leakage not known`,
  )
  return {
    kind: 'one-shot-rc',
    resistanceOhm: (megohm ?? 1) * 1e6,
    resistanceToleranceFraction: DEFAULT_TOLERANCE.resistor,
    capacitanceF: (microfarad ?? 1) * 1e-6,
    capacitanceToleranceFraction: DEFAULT_TOLERANCE.capacitor,
    supplyV: DEFAULT_TIMER_SUPPLY_V,
    icFamily: family === 'bipolar' ? 'bipolar' : 'cmos',
    leakage: { kind: 'unknown' },
  }
}

function readCircuit(cell: CellReader, supplyVoltageV: number): Circuit {
  const contactRatingA = cell.number('contact_a', { min: 0.5, max: 400 })
  return {
    supplyVoltageV,
    breakerA: cell.number('breaker_a', { min: 1, max: 400 }),
    conductor: readConductor(cell),
    lengthM: null,
    ambientC: null,
    groupedConductors: null,
    contactRatingA,
    contactRatingClass: contactRatingA === null ? null : 'resistive',
    polesSwitched: null,
    isolatorInSight: null,
    reliefValve: null,
    expansionVessel: null,
    closedSystem: null,
    extraLowVoltageSeparated: null,
    control: null,
  }
}

function readConductor(cell: CellReader): Circuit['conductor'] {
  const text = cell.text('conductor').toLowerCase().replace(',', '.').replace('mm²', 'mm2')
  if (text === '') return null
  const [, size, system] = /^(\d+(?:\.\d+)?)\s*(awg|mm2)$/.exec(text) ?? []
  if (!size || !system) {
    cell.problem('conductor', 'Write 10 awg or 2.5 mm2.')
    return null
  }
  return { size, system: system as 'awg' | 'mm2', material: 'copper', ratingC: system === 'awg' ? 60 : 70 }
}

const defaulted = <T>(defaults: string[], what: string, value: T): T => {
  defaults.push(what)
  return value
}
