/** Marks a page that the service worker may keep on the tenant's phone, and for whom: a page without the mark is never kept. */
import { createHash } from 'node:crypto'
import type { PersonId } from '#db/ids.ts'

export const keepOffline = (response: { readonly headers: Headers }, personId: PersonId): void =>
  response.headers.set('x-offline-for', createHash('sha256').update(personId).digest('hex').slice(0, 16))
