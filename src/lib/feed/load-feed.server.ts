/** What a calendar program gets under a secret address: the days of that tenancy and nothing of anybody else. */
import { createHash } from 'node:crypto'
import { openForLink } from '#lib/auth/scope.server.ts'
import type { Connection } from '#db/queries/account.ts'
import { listUnitEvaluations } from '#db/queries/evaluation.ts'
import { findFeed, findFeedOwner } from '#db/queries/feed.ts'
import { currentHardware } from '#db/queries/hardware.ts'
import { findProperty } from '#db/queries/property.ts'
import { findTenancy, tenancyCovers } from '#db/queries/tenancy.ts'
import { findUnit } from '#db/queries/unit.ts'
import { processConfig } from '#lib/config.server.ts'
import { addDays, civilOf, dayBounds } from '#lib/core/time/civil.ts'
import { HORIZON_DAYS } from '#lib/evaluation/load-inputs.server.ts'
import { formatDay, zoneCity } from '#lib/format.ts'
import { isPressed } from '#lib/tip/cautions.ts'
import { readFeedAddress } from './address.server.ts'
import { calendarText } from './calendar-text.ts'
import { eventsOf } from './events.ts'

/** A moved-out tenant's programs get an empty calendar so long, so that no alarm of the old unit rings; then the address is gone. */
export const EMPTY_AFTER_END_DAYS = 30

export type FeedAnswer =
  | { readonly status: 'open'; readonly text: string; readonly etag: string; readonly lastModifiedMs: number }
  | { readonly status: 'gone' }
  | { readonly status: 'not-found' }

export async function loadFeed(
  connection: Connection,
  { part, nowMs }: { readonly part: string; readonly nowMs: number },
): Promise<FeedAnswer> {
  const id = readFeedAddress(part)
  const owner = id && (await findFeedOwner(connection, id))
  if (!owner) return { status: 'not-found' }
  const db = openForLink(connection, owner.organisationId)
  const [tenancy, feed] = [await findTenancy(db, owner.tenancyId), await findFeed(db, owner.tenancyId)]
  const unit = tenancy && (await findUnit(db, tenancy.unitId))
  const property = unit && (await findProperty(db, unit.propertyId))
  if (!property || !feed) return { status: 'not-found' }
  const { day: today } = civilOf(nowMs, property.zone)
  if (tenancy.toDay !== null && today >= addDays(tenancy.toDay, EMPTY_AFTER_END_DAYS)) return { status: 'gone' }
  const record = await currentHardware(db, unit.id)
  const own = (await listUnitEvaluations(db, unit.id, today, addDays(today, HORIZON_DAYS))).filter(({ day }) => tenancyCovers(tenancy, day))
  const pressed = isPressed(record?.installation)
  const host = new URL(processConfig().baseUrl).hostname
  const text = calendarText({
    name: `Hot water, ${unit.code}`,
    description: describe({ zone: property.zone, pressed, toDay: tenancy.toDay, today }),
    events: own.flatMap((evaluation) => eventsOf({ evaluation, pressed, zone: property.zone })),
    uidOf: ({ key }) => `${key}-${tenancy.id}@${host}`,
  })
  return {
    status: 'open',
    text,
    etag: `"${createHash('sha256').update(text).digest('base64url')}"`,
    // At midnight a day leaves and another comes in, even if nothing was computed.
    lastModifiedMs: Math.max(
      feed.createdAtMs,
      dayBounds(today, property.zone).startsAtMs,
      ...own.map(({ evaluatedAtMs }) => evaluatedAtMs),
      record?.recordedAtMs ?? 0,
    ),
  }
}

interface Description {
  readonly zone: string
  readonly pressed: boolean
  readonly toDay: string | null
  readonly today: string
}

function describe({ zone, pressed, toDay, today }: Description): string {
  if (toDay !== null && toDay <= today) return `This tenancy ended on ${formatDay(toDay, 'd MMMM yyyy')}. Nothing more comes here.`
  const what = pressed ? 'by when to press the timer, with an alarm' : 'from when the water is hot; nothing to press'
  return `Today and the ${HORIZON_DAYS - 1} days after it: ${what}. Times in words are local (${zoneCity(zone)}). Computed every night.`
}
