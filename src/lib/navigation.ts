/** The rooms a person sees in an organisation or one of its properties, by role. */
import type { Role } from '#db/enums.ts'

export interface Room {
  readonly label: string
  readonly href: string
}
export interface Place {
  readonly slug: string
  readonly roles: readonly Role[]
  /** Slug of the property, or `null` for the organisation's own rooms. */
  readonly property: string | null
}

export function roomsFor({ slug, roles, property }: Place): readonly Room[] {
  const root = `/o/${slug}`
  const rooms: Room[] = []
  if (roles.includes('landlord')) {
    if (property) {
      const house = `${root}/p/${property}`
      rooms.push(
        { label: 'Today', href: `${house}/` },
        { label: 'Calendar', href: `${house}/calendar` },
        { label: 'Units', href: `${house}/units` },
        { label: 'Flags', href: `${house}/flags` },
        { label: 'Tariff', href: `${house}/tariff` },
        { label: 'Settings', href: `${house}/settings` },
      )
    } else {
      rooms.push({ label: 'Properties', href: `${root}/` })
    }
    rooms.push(
      { label: 'People', href: `${root}/people` },
      { label: 'Post', href: `${root}/post` },
      { label: 'Jobs', href: `${root}/jobs` },
    )
  }
  if (roles.includes('electrician') || roles.includes('landlord')) rooms.push({ label: 'Visits', href: `${root}/visits` })
  if (roles.includes('owner') || roles.includes('landlord')) rooms.push({ label: 'Digests', href: `${root}/digests` })
  if (roles.includes('tenant')) rooms.push({ label: 'My hot water', href: `${root}/my` })
  return rooms
}
