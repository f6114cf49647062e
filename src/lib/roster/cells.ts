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

export function cellReader({ line, values, decimalComma, problems }: Cells): CellReader {
  const text = (column: ColumnName) => (values.get(column) ?? '').trim().replace(/^'(?=[=+\-@])/, '')
  const problem = (column: ColumnName, message: string) => {
    problems.push({ line, column, value: text(column), message })
  }
  return {
    text,
    problem,
    number(column, { min, max }) {
      const raw = text(column)
      if (raw === '') return null
      const value = Number(decimalComma ? raw.replace(',', '.') : raw)
      if (!Number.isFinite(value)) problem(column, 'This is not a number. Write digits only, without a unit.')
      else if (value < min || value > max) problem(column, `This is outside ${min} to ${max}. Check the figure and its unit.`)
      else return value
      return null
    },
  }
}
