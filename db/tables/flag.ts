/** `flag`: a finding that somebody must act on; at most one open of a kind and subject. */
import type { Insertable, Selectable, Updateable } from 'kysely'
import type { OrganisationId, PersonId, PropertyId, UnitId, FlagId } from '../ids.ts'
import type { FlagKind } from '../enums.ts'

export interface FlagTable {
  organisation_id: OrganisationId
  id: FlagId
  property_id: PropertyId
  unit_id: UnitId | null
  kind: FlagKind
  severity: 'dangerous' | 'cold' | 'attention'
  summary: string
  evidence: string
  opened_at_ms: number
  seen_at_ms: number
  closed_at_ms: number | null
  closed_because: 'computation' | 'dismissed' | null
  closed_by: PersonId | null
  close_note: string | null
  dismissed_until: string | null
}

export type FlagRow = Selectable<FlagTable>
export type NewFlag = Insertable<FlagTable>
export type FlagPatch = Updateable<FlagTable>
