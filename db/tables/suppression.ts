/** `suppression`: an address that an organisation sends nothing to, or nothing of one kind. */
import type { Insertable, Selectable, Updateable } from 'kysely'
import type { MessageKind } from '../enums.ts'
import type { OrganisationId } from '../ids.ts'

export interface SuppressionTable {
  organisation_id: OrganisationId
  email: string
  /** `*`: every kind. */
  kind: MessageKind | '*'
  reason: 'bounce' | 'unsubscribe'
  detail: string
  at_ms: number
}

export type SuppressionRow = Selectable<SuppressionTable>
export type NewSuppression = Insertable<SuppressionTable>
export type SuppressionPatch = Updateable<SuppressionTable>
