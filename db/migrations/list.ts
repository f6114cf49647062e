/** Writes a closed word list as SQL literals for a CHECK. */
export const list = (words: readonly string[]): string => words.map((word) => `'${word.replaceAll("'", "''")}'`).join(', ')
