/** Reads a roster: any of the common delimiters, byte-order mark, decimal comma; every problem by line and column with its remedy. */
import { parse } from 'csv-parse/sync'
import type { Installation } from '#lib/core/hardware/types.ts'
import { emailField } from '#lib/account/schemas.ts'
import { installationSchema } from '#lib/hardware/schemas.ts'
import { type Week, weekSchema } from '#lib/preference/schemas.ts'
import { type ColumnName, COLUMNS, ROSTER_LIMITS } from './columns.ts'
import { type CellReader, cellReader, type RowProblem } from './cells.ts'
import { readInstallation } from './read-installation.ts'
import { parseShowers } from './programme-text.ts'

export type { RowProblem } from './cells.ts'

export interface RosterRow {
  readonly line: number
  readonly code: string
  readonly floor: number | null
  readonly stack: string | null
  readonly tenant: { readonly name: string; readonly email: string; readonly fromDay: string } | null
  /** `null`: the row says nothing about hardware. */
  readonly installation: Installation | null
  /** Which figures are defaults and not from the table. */
  readonly defaults: readonly string[]
  readonly week: Week | null
}
export interface RosterContext {
  readonly supplyVoltageV: number
  readonly today: string
}
export interface Roster {
  readonly rows: readonly RosterRow[]
  readonly problems: readonly RowProblem[]
}

const DELIMITERS = [',', ';', '\t', '|']

export function readRoster(text: string, context: RosterContext): Roster {
  const clean = text.replace(/^\uFEFF/, '')
  const firstLine = clean.split(/\r?\n/, 1)[0] ?? ''
  const delimiter = DELIMITERS.reduce((best, one) => (firstLine.split(one).length > firstLine.split(best).length ? one : best), ',')
  let lines: string[][]
  try {
    lines = parse(clean, { delimiter, relax_column_count: true, skip_empty_lines: true, trim: true })
  } catch (error) {
    return {
      rows: [],
      problems: [
        {
          line: 1,
          column: '',
          value: '',
          message: `This is not a readable CSV table: ${error instanceof Error ? error.message : 'unknown'}.`,
        },
      ],
    }
  }
  const [header = [], ...body] = lines
  const names = header.map((name) => name.trim().toLowerCase().replaceAll(' ', '_'))
  const problems: RowProblem[] = names.flatMap((name, index) =>
    COLUMNS.some((column) => column.name === name)
      ? []
      : [
          {
            line: 1,
            column: header[index] ?? '',
            value: '',
            message: 'This column is not known. Rename it or take it out; the known ones are listed below.',
          },
        ],
  )
  if (!names.includes('unit'))
    problems.push({ line: 1, column: 'unit', value: '', message: 'There is no column “unit”. Every row needs its unit’s code.' })
  if (body.length > ROSTER_LIMITS.rows)
    problems.push({
      line: 1,
      column: '',
      value: `${body.length} rows`,
      message: `At most ${ROSTER_LIMITS.rows} rows at a time. Split the table.`,
    })
  if (problems.length > 0) return { rows: [], problems }

  const rows: RosterRow[] = []
  const seen = new Map<string, number>()
  body.forEach((cells, index) => {
    const line = index + 2
    const cell = cellReader({
      line,
      values: new Map(names.map((name, at) => [name as ColumnName, cells[at] ?? ''])),
      decimalComma: delimiter !== ',',
      problems,
    })
    const row = readRow(cell, context, line)
    const before = seen.get(row.code)
    if (before !== undefined) cell.problem('unit', `This unit stands on line ${before} too. Keep one.`)
    seen.set(row.code, line)
    rows.push(row)
  })
  return { rows, problems }
}

function readRow(cell: CellReader, context: RosterContext, line: number): RosterRow {
  const code = cell.text('unit')
  if (code === '' || code.length > 30) cell.problem('unit', 'Enter a code of 1 to 30 characters.')
  const floor = cell.number('floor', { min: -9, max: 200 })
  if (floor !== null && !Number.isInteger(floor)) cell.problem('floor', 'A floor is a whole number.')
  const defaults: string[] = []
  const installation = readInstallation(cell, context, defaults)
  return {
    line,
    code,
    floor,
    stack: cell.text('stack') || null,
    tenant: readTenant(cell, context),
    installation: checked(cell, installation),
    defaults,
    week: readWeek(cell),
  }
}

function readTenant(cell: CellReader, { today }: RosterContext): RosterRow['tenant'] {
  const name = cell.text('tenant')
  const address = cell.text('email')
  const from = cell.text('from')
  if (name === '' && address === '') return null
  if (name === '') cell.problem('tenant', 'There is an e-mail without a name. Enter the tenant’s name.')
  const email = emailField.safeParse(address)
  if (!email.success) cell.problem('email', 'Enter the tenant’s e-mail, like name@example.org: tips go there.')
  if (from !== '' && !/^\d{4}-\d{2}-\d{2}$/.test(from)) cell.problem('from', 'Write the day as year-month-day, e.g. 2026-12-01.')
  return { name, email: email.success ? email.data : address, fromDay: from || today }
}

function readWeek(cell: CellReader): Week | null {
  const text = cell.text('showers')
  if (text === '') return null
  const parsed = parseShowers(text)
  if (!parsed.ok) {
    cell.problem('showers', parsed.message)
    return null
  }
  const valid = weekSchema.safeParse(parsed.value)
  if (!valid.success) cell.problem('showers', valid.error.issues[0]?.message ?? 'These showers are outside the limits.')
  return parsed.value
}

/** The form's own limits hold for the table too. */
function checked(cell: CellReader, installation: Installation | null): Installation | null {
  if (!installation) return null
  const valid = installationSchema.safeParse(installation)
  if (valid.success) return installation
  for (const issue of valid.error.issues) cell.problem(columnOf(issue.path.join('.')), issue.message)
  return installation
}

const columnOf = (path: string): ColumnName => {
  const places: readonly (readonly [string, ColumnName])[] = [
    ['nominalVolumeL', 'litres'],
    ['upperElement', 'upper_w'],
    ['lowerElement', 'lower_w'],
    ['setPointC', 'set_point_c'],
    ['mixingValveC', 'mixing_valve_c'],
    ['loss', 'loss'],
    ['settingMin', 'minutes'],
    ['resistanceOhm', 'r_megohm'],
    ['capacitanceF', 'c_microfarad'],
    ['programme', 'programme'],
    ['breakerA', 'breaker_a'],
    ['contactRatingA', 'contact_a'],
  ]
  return places.find(([part]) => path.includes(part))?.[1] ?? 'controller'
}
