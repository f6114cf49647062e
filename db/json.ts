/** JSON columns: text in SQLite, typed values outside. */

export const toJson = (value: unknown): string => JSON.stringify(value)

/** Every JSON column is written by `toJson` from a value whose schema was checked at the edge, so its type is known here. */
export const fromJson = <T>(text: string): T => JSON.parse(text) as T
