/** Fills an empty database with the demo; answers the lines that say how its people sign in, or none when there was nothing to do. */
import type { Kysely } from 'kysely'
import { fillDemo } from '#lib/demo/fill-demo.server.ts'
import { DEMO_PASSWORD, DEMO_PEOPLE } from '#lib/demo/people.ts'
import type { Database } from './schema.ts'

export async function seed(db: Kysely<Database>, nowMs: number): Promise<readonly string[]> {
  const { status } = await fillDemo(db, { nowMs, say: (line) => console.error(`  ${line}`) })
  if (status === 'not-empty') return []
  return [
    'The database was empty and holds the demo now. Its people:',
    ...DEMO_PEOPLE.map(({ email, role, shows }) => `  ${role.padEnd(12)} ${email.padEnd(36)} ${DEMO_PASSWORD}   sees ${shows}`),
  ]
}
