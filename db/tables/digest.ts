/** `digest`: the owner's monthly page, frozen; a correction is a new edition. */
import type { Insertable, Selectable, Updateable } from 'kysely'
import type { OrganisationId, PropertyId, DigestId } from '../ids.ts'

export interface DigestTable {
  organisation_id: OrganisationId
  id: DigestId
  property_id: PropertyId
  month: string
  edition: number
  figures: string
  reason: string | null
  created_at_ms: number
}

export type DigestRow = Selectable<DigestTable>
export type NewDigest = Insertable<DigestTable>
export type DigestPatch = Updateable<DigestTable>
