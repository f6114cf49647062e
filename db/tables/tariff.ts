/** `tariff`: a named tariff with versions. */
import type { Insertable, Selectable, Updateable } from 'kysely'
import type { OrganisationId, TariffId } from '../ids.ts'

export interface TariffTable {
  organisation_id: OrganisationId
  id: TariffId
  name: string
  zone: string
  created_at_ms: number
}

export type TariffRow = Selectable<TariffTable>
export type NewTariff = Insertable<TariffTable>
export type TariffPatch = Updateable<TariffTable>
