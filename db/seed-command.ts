/** Fills an empty database with the demo, and prints the demo people's sign-ins wherever the demo stands. Never touches a database that has anybody in it. */
import { DEMO_ORGANISATION, DEMO_PASSWORD, DEMO_PEOPLE } from '#lib/demo/people.ts'
import { command } from './command.ts'
import { openDatabase } from './connection.ts'
import { seed } from './seed.ts'

await command(async ({ databaseFile, demo }) => {
  const db = openDatabase(databaseFile)
  try {
    const anybody = await db.selectFrom('person').select('id').limit(1).executeTakeFirst()
    if (!anybody && demo) await seed(db, Date.now())
    const stands = await db.selectFrom('organisation').select('id').where('slug', '=', DEMO_ORGANISATION.slug).executeTakeFirst()
    if (!stands) return
    console.log(`\nThe demo's sign-ins (password of all: ${DEMO_PASSWORD}):`)
    for (const { role, email, shows } of DEMO_PEOPLE) console.log(`  ${role.padEnd(12)} ${email.padEnd(34)} ${shows}`)
  } finally {
    await db.destroy()
  }
})
