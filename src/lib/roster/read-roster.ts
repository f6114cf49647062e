/** Reads a roster against what is on record: what each row would change, and every problem by line and column with its remedy. */
import type { UnitId } from '#db/ids.ts'
import type { Preference } from '#db/queries/preference.ts'
import type { Tenancy } from '#db/queries/tenancy.ts'
import { describeController } from '#lib/core/controller/describe.ts'
import type { Installation } from '#lib/core/hardware/types.ts'
import { installationSchema } from '#lib/hardware/schemas.ts'
import { differences } from '#lib/hardware/view.ts'
import { weekSchema } from '#lib/preference/schemas.ts'
import { type Week } from '#lib/preference/week.ts'
import { type CellReader, cellReader, type RowProblem } from './cells.ts'
import type { ColumnName } from './columns.ts'
import { formatShowers, parseShowers } from './programme-text.ts'
import { readInstallation } from './read-installation.ts'
import { readTenant, type TenantChange, tenantWords } from './read-tenant.ts'
import { readTable, type TableRow } from './table.ts'
import { columnOf, unitCodeProblem } from './limits.ts'

/** A unit of the property as it is on record. */
export interface KnownUnit {
  readonly unitId: UnitId
  readonly floor: number | null
  readonly stack: string | null
  readonly installation: Installation | null
  readonly tenancies: readonly Tenancy[]
  /** The newest week of each tenancy. */
  readonly preferences: ReadonlyMap<Tenancy['id'], Preference>
}

export interface RosterRow {
  readonly line: number
  readonly code: string
  /** `null`: the unit is new. */
  readonly unitId: UnitId | null
  readonly floor: number | null
  readonly stack: string | null
  readonly movesPlace: boolean
  readonly tenant: TenantChange
  /** What is to be recorded; `null` = the row says nothing new about hardware. */
  readonly installation: Installation | null
  /** Which of its figures are defaults and not from the table. */
  readonly defaults: readonly string[]
  /** `null` = the showers stay. */
  readonly week: Week | null
  readonly willing: Preference['willing']
  /** Everything that the row changes, in words; empty = nothing. */
  readonly changes: readonly string[]
}
export interface RosterContext {
  readonly supplyVoltageV: number
  readonly today: string
  readonly known: ReadonlyMap<string, KnownUnit>
}
export interface Roster {
  readonly rows: readonly RosterRow[]
  readonly problems: readonly RowProblem[]
  /** Units on record that the table does not name; they stay as they are. */
  readonly unnamed: number
}

export function readRoster(text: string, context: RosterContext): Roster {
  const table = readTable(text)
  const problems: RowProblem[] = [...table.problems]
  const seen = new Map<string, number>()
  const rows = table.rows.map((row) => {
    const cell = cellReader({ ...row, decimalComma: table.decimalComma, problems })
    const code = cell.text('unit')
    const before = seen.get(code)
    if (before !== undefined) cell.problem('unit', `This unit stands on line ${before} too. Keep one.`)
    seen.set(code, row.line)
    return readRow(cell, row, context)
  })
  problems.sort((one, other) => one.line - other.line)
  return { rows, problems, unnamed: [...context.known.keys()].filter((code) => !seen.has(code)).length }
}

function readRow(cell: CellReader, { line }: TableRow, context: RosterContext): RosterRow {
  const code = cell.text('unit')
  const wrong = unitCodeProblem(code)
  if (wrong) cell.problem('unit', wrong)
  const known = context.known.get(code)
  const defaults: string[] = []
  const installation = readInstallation(cell, { supplyVoltageV: context.supplyVoltageV, before: known?.installation ?? null, defaults })
  if (installation) checkLimits(cell, installation)
  const place = { floor: readFloor(cell) ?? known?.floor ?? null, stack: readStack(cell) ?? known?.stack ?? null }
  const tenant = readTenant(cell, { today: context.today, tenancies: known?.tenancies ?? [] })
  const { week, willing } = readWeek(cell, tenant, known)
  return {
    line,
    code,
    unitId: known?.unitId ?? null,
    ...place,
    movesPlace: known !== undefined && (known.floor !== place.floor || known.stack !== place.stack),
    tenant,
    installation,
    defaults,
    week,
    willing,
    changes: [
      ...(known ? placeWords(known, place) : ['New unit']),
      ...(installation
        ? known?.installation
          ? differences(known.installation, installation)
          : [describeController(installation.controller)]
        : []),
      ...tenantWords(tenant),
      ...(week ? [`Showers: ${formatShowers(week) || 'none'}`] : []),
    ],
  }
}

function readFloor(cell: CellReader): number | null {
  const floor = cell.number('floor', { min: -9, max: 200 })
  if (floor !== null && !Number.isInteger(floor)) cell.problem('floor', 'A floor is a whole number.')
  return floor
}

function readStack(cell: CellReader): string | null {
  const stack = cell.text('stack')
  if (stack.length > 20) cell.problem('stack', 'A stack has at most 20 characters.')
  return stack || null
}

const placeWords = (before: Pick<KnownUnit, 'floor' | 'stack'>, after: Pick<KnownUnit, 'floor' | 'stack'>): readonly string[] => [
  ...(before.floor === after.floor ? [] : [`Floor: ${before.floor ?? 'not known'} → ${after.floor}`]),
  ...(before.stack === after.stack ? [] : [`Stack: ${before.stack ?? 'not known'} → ${after.stack}`]),
]

function readWeek(cell: CellReader, tenant: TenantChange, known: KnownUnit | undefined): Pick<RosterRow, 'week' | 'willing'> {
  const living = tenant.kind === 'moves-in' ? null : tenant.living
  const current = living && known?.preferences.get(living.id)
  const willing = current?.willing ?? []
  if (!cell.says('showers', current ? formatShowers(current.week.map((day) => [...day])) : '')) return { week: null, willing }
  if (tenant.kind !== 'moves-in' && !living) {
    cell.problem('showers', 'Nobody lives here. Enter the tenant’s name and e-mail, or empty the cell.')
    return { week: null, willing }
  }
  const parsed = parseShowers(cell.text('showers'), current?.week.flat()[0])
  if (!parsed.ok) {
    cell.problem('showers', parsed.message)
    return { week: null, willing }
  }
  const valid = weekSchema.safeParse(parsed.value)
  if (!valid.success) cell.problem('showers', valid.error.issues[0]?.message ?? 'These showers are outside the limits.')
  return { week: parsed.value, willing }
}

/** The form's own limits hold for the table too; a cell is named once. */
function checkLimits(cell: CellReader, installation: Installation): void {
  const valid = installationSchema.safeParse(installation)
  if (valid.success) return
  const named = new Set<ColumnName>()
  for (const issue of valid.error.issues) {
    const column = columnOf(issue.path.join('.'))
    if (!named.has(column)) cell.problem(column, issue.message)
    named.add(column)
  }
}
