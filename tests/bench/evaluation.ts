/** How long the nightly evaluation of a building takes, and what a letter costs to queue. */
import { inTransaction } from '#db/org-db.ts'
import { addMessage } from '#db/queries/message.ts'
import { DEMO_BUILDINGS } from '#lib/demo/buildings.ts'
import { evaluateProperty } from '#lib/evaluation/evaluate-property.server.ts'
import { makeBuilding } from '../support/building.ts'
import { freshDatabase } from '../support/database.ts'
import { makeLandlord, NOW_MS } from '../support/factories.ts'
import { tipLetter } from '../support/outbox.ts'

const LETTERS = 500

export async function benchEvaluation() {
  const figures: { label: string; value: number; unit: string }[] = []
  for (const building of DEMO_BUILDINGS) {
    const db = await freshDatabase()
    const org = await makeLandlord(db)
    const { propertyId } = await makeBuilding(org, building)
    const startedAtMs = performance.now()
    const { units } = await evaluateProperty(org, { propertyId, nowMs: NOW_MS })
    figures.push({ label: `evaluation of ${units} units, eight days`, value: performance.now() - startedAtMs, unit: 'ms' })
    await db.destroy()
  }
  return figures
}

export async function benchOutbox() {
  const db = await freshDatabase()
  const org = await makeLandlord(db)
  const startedAtMs = performance.now()
  for (let index = 0; index < LETTERS; index++)
    await inTransaction(org, (trx) => addMessage(trx, tipLetter({ toEmail: `tenant${index}@quill.example` })))
  const value = LETTERS / ((performance.now() - startedAtMs) / 1000)
  await db.destroy()
  return [{ label: 'letters queued, one a transaction, in memory', value, unit: 'a second' }]
}
