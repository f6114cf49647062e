/** A tenant's calendar subscription as their page shows it. */
import type { OrgDb } from '#db/org-db.ts'
import { findFeed } from '#db/queries/feed.ts'
import { currentHardware } from '#db/queries/hardware.ts'
import { HORIZON_DAYS } from '#lib/evaluation/load-inputs.server.ts'
import { formatInstant } from '#lib/format.ts'
import { isPressed } from '#lib/tip/cautions.ts'
import { openTenancy, type TenancyChoice } from '#lib/tip/own-tenancy.server.ts'
import { feedAddress } from './address.server.ts'
import { EMPTY_AFTER_END_DAYS } from './load-feed.server.ts'

export async function loadSubscription(db: OrgDb, { tenancyId, nowMs }: TenancyChoice) {
  const { tenancy, unit, property, cardQuery } = await openTenancy(db, { tenancyId, nowMs })
  const feed = await findFeed(db, tenancy.id)
  const address = feed && feedAddress(feed.id)
  return {
    tenancyId: tenancy.id,
    unitCode: unit.code,
    cardQuery,
    pressed: isPressed((await currentHardware(db, unit.id))?.installation),
    daysAhead: HORIZON_DAYS - 1,
    emptyAfterEndDays: EMPTY_AFTER_END_DAYS,
    subscription:
      feed && address
        ? {
            address,
            // Opens the calendar program of the phone where there is one.
            opens: address.replace(/^https?:/, 'webcal:'),
            since: formatInstant(feed.createdAtMs, property.zone, 'd MMMM yyyy'),
          }
        : null,
  }
}
export type Subscription = Awaited<ReturnType<typeof loadSubscription>>
