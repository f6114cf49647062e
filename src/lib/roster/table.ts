/** A pasted or uploaded table as named cells: delimiter guessed, byte-order mark dropped, each row with the line it begins on. */
import { CsvError, parse } from 'csv-parse/sync'
import type { RowProblem } from './cells.ts'
import { type ColumnName, COLUMNS, ROSTER_LIMITS } from './columns.ts'

export interface TableRow {
  /** 1 is the header's, blank lines counted, as an editor shows it. */
  readonly line: number
  readonly values: ReadonlyMap<ColumnName, string>
}
export interface Table {
  readonly rows: readonly TableRow[]
  readonly columns: ReadonlySet<ColumnName>
  readonly decimalComma: boolean
  readonly problems: readonly RowProblem[]
}

const DELIMITERS = [',', ';', '\t', '|']
/** What a reader puts in the place of bytes that are not UTF-8. */
const REPLACEMENT = '\uFFFD'

interface ReadLine {
  readonly line: number
  readonly cells: readonly string[]
}

export function readTable(text: string): Table {
  // Editors mix line endings; the parser takes one kind.
  const clean = text.replace(/^\uFEFF/, '').replace(/\r\n?/g, '\n')
  const header = clean.split('\n').find((line) => line.trim() !== '') ?? ''
  const delimiter = DELIMITERS.reduce((best, one) => (header.split(one).length > header.split(best).length ? one : best), ',')
  const table = { rows: [], columns: new Set<ColumnName>(), decimalComma: delimiter !== ',' }
  if (clean.includes('\0'))
    return {
      ...table,
      problems: [whole('This is not a text table but another kind of file. Save it as “CSV UTF-8” and choose that file.')],
    }
  try {
    const [first, ...body] = readLines(clean, delimiter)
    if (!first) return { ...table, problems: [whole('The table is empty. Its first line names the columns.')] }
    const names = namesOf(first)
    const problems = [...headerProblems(first, names), ...(body.length > ROSTER_LIMITS.rows ? [tooMany(body.length)] : [])]
    if (problems.length > 0) return { ...table, problems }
    return {
      ...table,
      columns: new Set(names.filter(isColumn)),
      rows: body.map(({ line, cells }) => ({
        line,
        values: new Map(names.flatMap((name, at) => (isColumn(name) ? [[name, cells[at] ?? ''] as const] : []))),
      })),
      problems: body.flatMap((row) => rowProblems(row, names)),
    }
  } catch (error) {
    if (!(error instanceof CsvError)) throw error
    return { ...table, problems: [{ ...whole(`This is not a readable table: ${error.message}.`), line: Number(error.lines ?? 1) }] }
  }
}

function readLines(text: string, delimiter: string): readonly ReadLine[] {
  const lines: ReadLine[] = []
  parse(text, {
    delimiter,
    record_delimiter: '\n',
    relax_column_count: true,
    trim: true,
    on_record(cells: string[], info) {
      // `lines` is where a record ends; a quoted cell with line breaks makes it begin earlier.
      const breaks = cells.join('').split('\n').length - 1
      if (cells.some((cell) => cell !== '')) lines.push({ line: info.lines - breaks, cells })
      return null
    },
  })
  return lines
}

/** Spreadsheets end lines with empty cells; those name nothing. */
function namesOf({ cells }: ReadLine): readonly string[] {
  const names = cells.map((name) => name.trim().toLowerCase().replaceAll(' ', '_'))
  return names.slice(0, names.findLastIndex((name) => name !== '') + 1)
}

const isColumn = (name: string): name is ColumnName => COLUMNS.some((column) => column.name === name)
const whole = (message: string): RowProblem => ({ line: 1, column: '', value: '', message })
const tooMany = (count: number): RowProblem => ({
  ...whole(`At most ${ROSTER_LIMITS.rows} rows at a time. Split the table.`),
  value: `${count} rows`,
})

function headerProblems({ line, cells }: ReadLine, names: readonly string[]): readonly RowProblem[] {
  const problems = names.flatMap((name, at): readonly RowProblem[] => {
    const column = cells[at] ?? ''
    if (!isColumn(name))
      return [{ line, column, value: '', message: 'This column is not known. Rename it or take it out; the known ones are listed below.' }]
    return names.indexOf(name) < at ? [{ line, column, value: '', message: 'This column stands here twice. Keep one of them.' }] : []
  })
  const unit = { line, column: 'unit', value: '', message: 'There is no column “unit”. Every row needs its unit’s code.' }
  return names.includes('unit') ? problems : [...problems, unit]
}

function rowProblems({ line, cells }: ReadLine, names: readonly string[]): readonly RowProblem[] {
  const over = cells.slice(names.length).filter((cell) => cell !== '')
  const shifted: RowProblem = {
    line,
    column: '',
    value: over.join(' '),
    message: `This row has ${cells.length} cells, the header ${names.length}. Put a cell that holds the delimiter in double quotes.`,
  }
  const unread = cells.findIndex((cell) => cell.includes(REPLACEMENT))
  const unreadable = {
    line,
    column: names[unread] ?? '',
    value: cells[unread] ?? '',
    message: 'A letter here cannot be read. Save the table as “CSV UTF-8”.',
  }
  return [...(over.length > 0 ? [shifted] : []), ...(unread >= 0 ? [unreadable] : [])]
}
