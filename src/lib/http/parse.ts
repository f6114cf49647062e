/** Zod at the edge: input becomes a typed value or an `invalid` AppError that names every field. */
import type { z } from 'zod'
import { invalid } from './app-error.ts'

export function parseInput<Schema extends z.ZodType>(schema: Schema, input: unknown): z.infer<Schema> {
  const parsed = schema.safeParse(input)
  if (parsed.success) return parsed.data
  throw invalid(parsed.error.issues.map((issue) => ({ field: issue.path.join('.'), message: issue.message })))
}
