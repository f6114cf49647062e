/**
 * Events as an iCalendar object (RFC 5545, RFC 7986). Each time is an instant in UTC, which needs no VTIMEZONE and is right in
 * any program over any clock change; the words of an event name the wall clock of the property.
 */
import ical, { ICalAlarmType, ICalEventTransparency } from 'ical-generator'
import { MS_PER_MIN } from '#lib/core/units.ts'
import type { FeedEvent } from './events.ts'

export interface CalendarText {
  readonly name: string
  readonly description: string
  readonly events: readonly FeedEvent[]
  /** Makes an event's name unique in the world and stays when the address is renewed. */
  readonly uidOf: (event: FeedEvent) => string
}

/** How often a program should look again: figures change at night, and at once when a record does. */
const LOOK_AGAIN_S = 3_600

// No METHOD: with PUBLISH an ORGANIZER would be due (RFC 5546, 3.2.1), and nobody's address belongs into a feed.
export function calendarText({ name, description, events, uidOf }: CalendarText): string {
  const prodId = { company: 'Dwellhour', product: 'Hot water', language: 'EN' }
  const calendar = ical({ name, description, prodId, ttl: LOOK_AGAIN_S })
  for (const event of events) {
    const computedAt = new Date(event.computedAtMs)
    const written = calendar.createEvent({
      id: uidOf(event),
      // Only has to grow; the minute of the computation does (RFC 5545, 3.8.7.4).
      sequence: Math.floor(event.computedAtMs / MS_PER_MIN),
      stamp: computedAt,
      lastModified: computedAt,
      start: new Date(event.startsAtMs),
      end: new Date(event.endsAtMs),
      summary: event.summary,
      description: event.description,
      transparency: ICalEventTransparency.TRANSPARENT,
    })
    if (event.alarm) written.createAlarm({ type: ICalAlarmType.display, trigger: 0, description: event.summary })
  }
  return calendar.toString()
}
