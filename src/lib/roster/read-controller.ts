/** The controller of one roster row: of the recorded kind a cell changes what it says, another kind starts anew. */
import type {
  CapacitorLeakage,
  Controller,
  DialController,
  OneShotFixedController,
  OneShotRcController,
  SwitchStep,
} from '#lib/core/controller/types.ts'
import {
  DEFAULT_SCALE_MAX_MIN,
  DEFAULT_SWITCH_STEP_MIN,
  DEFAULT_TIMER_SUPPLY_V,
  DEFAULT_TOLERANCE_FRACTION,
} from '#lib/hardware/defaults.ts'
import { RUN_MIN } from '#lib/hardware/schemas.ts'
import type { CellReader } from './cells.ts'
import type { ColumnName } from './columns.ts'
import { CONTROLLER_COLUMNS, CONTROLLER_WORDS } from './hardware-cells.ts'
import { parseProgramme } from './programme-text.ts'
import { named, type RowHardware } from './row-hardware.ts'

const KINDS = Object.keys(CONTROLLER_WORDS) as readonly Controller['kind'][]
const ALL_COLUMNS = [...new Set(Object.values(CONTROLLER_COLUMNS).flat())]

export function readController(row: RowHardware): Controller | null {
  const { cell, before } = row
  const word = cell.text('controller').toLowerCase()
  const kind = word === '' ? before?.controller.kind : KINDS.find((one) => CONTROLLER_WORDS[one] === word)
  if (!kind) {
    cell.problem('controller', 'Choose dial, one-shot, rc, switch or supplier.')
    return null
  }
  for (const column of ALL_COLUMNS)
    if (!CONTROLLER_COLUMNS[kind].includes(column) && cell.text(column) !== '')
      cell.problem(column, `This does not belong to “${CONTROLLER_WORDS[kind]}”. Empty the cell, or correct the controller.`)
  switch (kind) {
    case 'dial':
      return readDial(row, before?.controller.kind === kind ? before.controller : null)
    case 'one-shot-fixed':
      return readFixed(row, before?.controller.kind === kind ? before.controller : null)
    case 'one-shot-rc':
      return readRc(row, before?.controller.kind === kind ? before.controller : null)
    case 'time-switch': {
      const known = before?.controller.kind === kind ? before.controller : null
      const programme = readProgramme(row, known?.programme)
      if (known) return { ...known, programme }
      named(row.defaults, 'a switch that does not follow the clock change', null)
      return { kind, stepMin: DEFAULT_SWITCH_STEP_MIN, programme, followsClockChange: false, driftMin: 0, powerReserveH: null }
    }
    case 'supplier-contactor':
      return { kind, windows: readProgramme(row, before?.controller.kind === kind ? before.controller.windows : undefined) }
  }
}

const asFraction = (percent: number | null): number | null => (percent === null ? null : Number((percent / 100).toPrecision(7)))

/** The recorded value where the cell says nothing else: a figure rounded in the table must not replace it. */
const kept = <T>(
  cell: CellReader,
  { column, recorded, known, read }: { column: ColumnName; recorded: string | undefined; known: T | undefined; read: () => T | null },
): T | null => (known !== undefined && !cell.says(column, recorded) ? known : read())

function readMinutes({ cell, recorded }: RowHardware, known: number | undefined): number {
  const minutes = kept(cell, { column: 'minutes', recorded: recorded.minutes, known, read: () => cell.number('minutes', RUN_MIN) })
  if (minutes === null && cell.text('minutes') === '') cell.problem('minutes', 'Enter the minutes of one run.')
  return minutes ?? RUN_MIN.min
}

interface ToleranceCell {
  readonly column: 'tolerance_pct' | 'r_tolerance_pct' | 'c_tolerance_pct'
  readonly what: string
  readonly known: number | undefined
  readonly usual: number
}
const readTolerance = ({ cell, recorded, defaults }: RowHardware, { column, what, known, usual }: ToleranceCell): number =>
  kept(cell, { column, recorded: recorded[column], known, read: () => asFraction(cell.number(column, { min: 0, max: 80 })) }) ??
  named(defaults, `${what} tolerance ${usual * 100} %`, usual)

function readDial(row: RowHardware, known: DialController | null): Controller {
  const settingMin = readMinutes(row, known?.settingMin)
  const usual = DEFAULT_TOLERANCE_FRACTION.dial
  return {
    kind: 'dial',
    settingMin,
    scaleMaxMin: Math.max(known?.scaleMaxMin ?? DEFAULT_SCALE_MAX_MIN, settingMin),
    toleranceFraction: readTolerance(row, { column: 'tolerance_pct', what: 'dial', known: known?.toleranceFraction, usual }),
  }
}

function readFixed(row: RowHardware, known: OneShotFixedController | null): Controller {
  const usual = DEFAULT_TOLERANCE_FRACTION.fixed
  return {
    kind: 'one-shot-fixed',
    settingMin: readMinutes(row, known?.settingMin),
    toleranceFraction: readTolerance(row, { column: 'tolerance_pct', what: 'one-shot', known: known?.toleranceFraction, usual }),
  }
}

function readRc(row: RowHardware, known: OneShotRcController | null): Controller {
  const { cell, recorded, defaults } = row
  const megohm = () => cell.number('r_megohm', { min: 0.001, max: 1_000 })
  const microfarad = () => cell.number('c_microfarad', { min: 0.001, max: 100_000 })
  const scaled = (value: number | null, scale: number) => (value === null ? null : Number((value * scale).toPrecision(7)))
  const resistanceOhm = kept(cell, {
    column: 'r_megohm',
    recorded: recorded.r_megohm,
    known: known?.resistanceOhm,
    read: () => scaled(megohm(), 1e6),
  })
  const capacitanceF = kept(cell, {
    column: 'c_microfarad',
    recorded: recorded.c_microfarad,
    known: known?.capacitanceF,
    read: () => scaled(microfarad(), 1e-6),
  })
  if (resistanceOhm === null && cell.text('r_megohm') === '') cell.problem('r_megohm', 'Enter the timing resistor in megohm.')
  if (capacitanceF === null && cell.text('c_microfarad') === '') cell.problem('c_microfarad', 'Enter the timing capacitor in microfarad.')
  return {
    kind: 'one-shot-rc',
    resistanceOhm: resistanceOhm ?? 1e6,
    resistanceToleranceFraction: readTolerance(row, {
      column: 'r_tolerance_pct',
      what: 'resistor',
      known: known?.resistanceToleranceFraction,
      usual: DEFAULT_TOLERANCE_FRACTION.resistor,
    }),
    capacitanceF: capacitanceF ?? 1e-6,
    capacitanceToleranceFraction: readTolerance(row, {
      column: 'c_tolerance_pct',
      what: 'capacitor',
      known: known?.capacitanceToleranceFraction,
      usual: DEFAULT_TOLERANCE_FRACTION.capacitor,
    }),
    supplyV:
      cell.number('timer_v', { min: 2, max: 18 }) ??
      known?.supplyV ??
      named(defaults, `timer supply ${DEFAULT_TIMER_SUPPLY_V} V`, DEFAULT_TIMER_SUPPLY_V),
    icFamily: readFamily(cell, known),
    leakage: readLeakage(row, known),
  }
}

function readFamily(cell: CellReader, known: OneShotRcController | null): OneShotRcController['icFamily'] {
  const family = cell.text('timer_ic').toLowerCase()
  if (family === 'bipolar' || family === 'cmos') return family
  if (family !== '' || !known) cell.problem('timer_ic', 'Write bipolar or cmos: it is printed on the chip (TLC, ICM, TS and LMC are CMOS).')
  return known?.icFamily ?? 'cmos'
}

function readLeakage({ cell, recorded, defaults }: RowHardware, known: OneShotRcController | null): CapacitorLeakage {
  if (!cell.says('leakage', recorded.leakage)) return known?.leakage ?? named(defaults, 'capacitor leakage not known', { kind: 'unknown' })
  const text = cell.text('leakage').toLowerCase().replace(',', '.')
  const [, digits, unit] = /^(\d+(?:\.\d+)?)\s*(megohm|ua)$/.exec(text) ?? []
  const value = Number(digits)
  if (unit === 'megohm' && value > 0) return { kind: 'resistance', leakageOhm: Number((value * 1e6).toPrecision(7)) }
  if (unit === 'ua') return { kind: 'current', leakageA: Number((value * 1e-6).toPrecision(7)) }
  const [, word, volts] = /^([a-z-]+)\s+(\d+(?:\.\d+)?)\s*v$/.exec(text) ?? []
  const series = (['electrolytic', 'low-leakage', 'film-polypropylene', 'film-polyester'] as const).find((one) => one === word)
  if (series) return { kind: 'series', series, ratedV: Number(volts) }
  cell.problem(
    'leakage',
    'Write 400 megohm, 0.2 ua, or a series with its voltage: electrolytic, low-leakage, film-polypropylene or film-polyester 25 v.',
  )
  return known?.leakage ?? { kind: 'unknown' }
}

function readProgramme({ cell, recorded }: RowHardware, known: readonly SwitchStep[] | undefined): readonly SwitchStep[] {
  if (known && !cell.says('programme', recorded.programme)) return known
  const programme = parseProgramme(cell.text('programme'))
  if (programme.ok) return programme.value
  cell.problem('programme', programme.message)
  return known ?? []
}
