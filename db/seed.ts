/** Fills an empty database with the demo and prints how its people sign in; prints nothing and changes nothing otherwise. */
import { fillDemo } from '#lib/demo/fill-demo.server.ts'
import { DEMO_PASSWORD, DEMO_PEOPLE } from '#lib/demo/people.ts'
import { command } from './command.ts'
import { openDatabase } from './connection.ts'

await command(async ({ databaseFile, demo, baseUrl }) => {
  if (!demo) return
  const db = openDatabase(databaseFile)
  try {
    const { status } = await fillDemo(db, { nowMs: Date.now(), say: (line) => console.error(`  ${line}`) })
    if (status === 'not-empty') return
    console.log(`The database was empty and holds the demo now. Sign in at ${baseUrl}/sign-in`)
    for (const { email, role, shows } of DEMO_PEOPLE)
      console.log(`  ${role.padEnd(12)} ${email.padEnd(36)} ${DEMO_PASSWORD}   sees ${shows}`)
  } finally {
    await db.destroy()
  }
})
