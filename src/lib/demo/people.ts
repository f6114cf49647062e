/** The invented people of the demo and how they sign in; no name here is meant to match anybody. */
import type { Role } from '#db/enums.ts'

/** One password for all demo people: they exist only in a database that was empty at start on this machine. */
export const DEMO_PASSWORD = 'warm-by-seven-1'

export interface DemoPerson {
  readonly name: string
  readonly email: string
  readonly role: Role
  /** What signing in as this person shows. */
  readonly shows: string
}

export const DEMO_ORGANISATION = { slug: 'brindlecross', name: 'Brindlecross Lettings' } as const

export const LANDLORD: DemoPerson = {
  name: 'Ottilie Vargane',
  email: 'landlord@brindlecross.example',
  role: 'landlord',
  shows: 'three buildings, their calendars, units, flags and tariffs',
}
export const ELECTRICIAN: DemoPerson = {
  name: 'Marek Odunsky',
  email: 'electrician@brindlecross.example',
  role: 'electrician',
  shows: 'the visits waiting and what to change',
}
export const OWNER: DemoPerson = {
  name: 'Henrike Solbakk',
  email: 'owner@brindlecross.example',
  role: 'owner',
  shows: 'the monthly digests',
}
export const TENANT: DemoPerson = {
  name: 'Imre Castelnau',
  email: 'tenant@brindlecross.example',
  role: 'tenant',
  shows: 'the card and the week of showers of Cinder Wharf 5C, whose run is too short',
}
export const DEMO_PEOPLE: readonly DemoPerson[] = [LANDLORD, TENANT, ELECTRICIAN, OWNER]

const GIVEN = [
  'Aster',
  'Bao',
  'Corin',
  'Dunja',
  'Edda',
  'Farid',
  'Greta',
  'Hollis',
  'Ilse',
  'Jarek',
  'Keziah',
  'Lorcan',
  'Mirela',
  'Nuno',
  'Odalys',
  'Pavel',
  'Quinn',
  'Runa',
  'Soren',
  'Tamsin',
]
const FAMILY = [
  'Abendroth',
  'Brackwater',
  'Cravenhall',
  'Dulverne',
  'Eskridge',
  'Farrowby',
  'Gillemot',
  'Hathersedge',
  'Ingleforth',
  'Jasperin',
  'Kettlewyn',
  'Lindqvast',
  'Marchmere',
]

/** The n-th invented tenant; names repeat only after 260. */
export function demoTenant(index: number): { readonly name: string; readonly email: string } {
  const given = GIVEN[index % GIVEN.length] ?? 'Aster'
  const family = FAMILY[index % FAMILY.length] ?? 'Abendroth'
  return { name: `${given} ${family}`, email: `${given}.${family}.${index}@tenants.example`.toLowerCase() }
}
