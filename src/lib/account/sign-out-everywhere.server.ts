/** Ends every session of a person, on every device. */
import type { PersonId } from '#db/ids.ts'
import { addAccountEvent, type Connection, deleteSessionsOf } from '#db/queries/account.ts'

export async function signOutEverywhere(
  db: Connection,
  { personId, nowMs }: { readonly personId: PersonId; readonly nowMs: number },
): Promise<void> {
  await db.transaction().execute(async (trx) => {
    await deleteSessionsOf(trx, personId)
    await addAccountEvent(trx, personId, 'sign-out-everywhere', nowMs)
  })
}
