/** `tariff_version`: what a tariff costs from a local day on; the record is the document it came from. */
import type { Insertable, Selectable, Updateable } from 'kysely'
import type { OrganisationId, TariffId, TariffVersionId } from '../ids.ts'

export interface TariffVersionTable {
  organisation_id: OrganisationId
  id: TariffVersionId
  tariff_id: TariffId
  effective_from: string
  version: string
  record: string | null
  source: string
  created_at_ms: number
}

export type TariffVersionRow = Selectable<TariffVersionTable>
export type NewTariffVersion = Insertable<TariffVersionTable>
export type TariffVersionPatch = Updateable<TariffVersionTable>
