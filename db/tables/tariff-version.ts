/** `tariff_version`: what a tariff costs from a local day on; the record is the document it came from. */
import type { Insertable, Selectable, Updateable } from 'kysely'
import type { OrganisationId, PersonId, TariffId, TariffVersionId } from '../ids.ts'

export interface TariffVersionTable {
  organisation_id: OrganisationId
  id: TariffVersionId
  tariff_id: TariffId
  effective_from: string
  /** A correction of the day's version is its next edition; the last one counts. */
  edition: number
  version: string
  record: string | null
  source: string
  /** Why it corrects what was there; `null` where it does not. */
  reason: string | null
  /** Who entered it; `null` where that was not kept. */
  person_id: PersonId | null
  created_at_ms: number
}

export type TariffVersionRow = Selectable<TariffVersionTable>
export type NewTariffVersion = Insertable<TariffVersionTable>
export type TariffVersionPatch = Updateable<TariffVersionTable>
