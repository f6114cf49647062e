/** Where things lie, for the scripts that run before anything is installed. */
import { fileURLToPath } from 'node:url'
import { join } from 'node:path'

export const ROOT = fileURLToPath(new URL('../..', import.meta.url))
export const inRoot = (...parts) => join(ROOT, ...parts)
