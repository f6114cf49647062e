/** `visit_flag`: the flags a visit answers. */
import type { Insertable, Selectable, Updateable } from 'kysely'
import type { OrganisationId, FlagId, VisitId } from '../ids.ts'

export interface VisitFlagTable {
  organisation_id: OrganisationId
  visit_id: VisitId
  flag_id: FlagId
}

export type VisitFlagRow = Selectable<VisitFlagTable>
export type NewVisitFlag = Insertable<VisitFlagTable>
export type VisitFlagPatch = Updateable<VisitFlagTable>
