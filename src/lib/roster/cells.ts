/** One row's cells by column name, with numbers in either decimal style and problems noted where they arise. */
import type { ColumnName } from './columns.ts'

export interface RowProblem {
  readonly line: number
  readonly column: string
  readonly value: string
  /** What is wrong and what to do. */
  readonly message: string
}

export interface CellReader {
  text(column: ColumnName): string
  /** Whether the cell holds something that is not already recorded; an empty cell says nothing. */
  says(column: ColumnName, recorded?: string): boolean
  /** `null` when empty or wrong; wrong is noted. */
  number(column: ColumnName, range: { readonly min: number; readonly max: number }): number | null
  problem(column: ColumnName, message: string): void
}

export interface Cells {
  readonly line: number
  readonly values: ReadonlyMap<ColumnName, string>
  /** Where commas do not part cells they may be decimal. */
  readonly decimalComma: boolean
  readonly problems: RowProblem[]
}

const NUMBER = /^[+-]?(\d+\.?\d*|\.\d+)$/

export function cellReader({ line, values, decimalComma, problems }: Cells): CellReader {
  // The apostrophe is how the export keeps a spreadsheet from running a cell.
  const text = (column: ColumnName) => (values.get(column) ?? '').trim().replace(/^'(?=[=+\-@])/, '')
  const plain = (raw: string) => (decimalComma ? raw.replace(',', '.') : raw)
  const problem = (column: ColumnName, message: string) => {
    problems.push({ line, column, value: text(column), message })
  }
  return {
    text,
    problem,
    says(column, recorded = '') {
      const said = text(column)
      if (said === '' || said.toLowerCase() === recorded.toLowerCase()) return false
      return !(NUMBER.test(plain(said)) && NUMBER.test(recorded) && Number(plain(said)) === Number(recorded))
    },
    number(column, { min, max }) {
      const raw = text(column)
      if (raw === '') return null
      const value = Number(plain(raw))
      if (!NUMBER.test(plain(raw))) problem(column, 'This is not a number. Write digits only, without a unit or thousands separators.')
      else if (value < min || value > max) problem(column, `This is outside ${min} to ${max}. Check the figure and its unit.`)
      else return value
      return null
    },
  }
}
