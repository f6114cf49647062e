/** `property`: a building: where it is, what feeds it, what power costs there. */
import type { Insertable, Selectable, Updateable } from 'kysely'
import type { OrganisationId, PropertyId, TariffId } from '../ids.ts'
import type { ProfileId } from '#lib/core/hardware/types.ts'
import type { HygienePolicyId } from '#lib/core/hygiene/types.ts'

export interface PropertyTable {
  organisation_id: OrganisationId
  id: PropertyId
  slug: string
  name: string
  address: string
  zone: string
  country: string
  currency: string
  rule_profile: ProfileId
  hygiene_policy: HygienePolicyId
  supply_voltage_v: number
  phases: number
  service_rating_a: number
  base_load_w: number
  climate: string
  tariff_id: TariffId | null
  sending_paused_at_ms: number | null
  created_at_ms: number
}

export type PropertyRow = Selectable<PropertyTable>
export type NewProperty = Insertable<PropertyTable>
export type PropertyPatch = Updateable<PropertyTable>
