/** What is kept about a tenant in an organisation: for their page, and whole for their download. Only their own tenancies, past ones too. */
import type { OrgDb } from '#db/org-db.ts'
import { listUnitEvaluations } from '#db/queries/evaluation.ts'
import { listAnsweredDays } from '#db/queries/feedback.ts'
import { findFeed } from '#db/queries/feed.ts'
import { listShowerMails, listWeeks } from '#db/queries/kept.ts'
import { listMembers } from '#db/queries/organisation.ts'
import { actingPerson } from '#lib/auth/permission.ts'
import { notFound } from '#lib/http/app-error.ts'
import { clockWords } from '#lib/strip/clock.ts'
import { type Home, ownTenancies } from '#lib/tip/own-tenancy.server.ts'
import { tracesOf } from './traces.ts'

export interface KeptTenancy {
  readonly home: Home
  readonly weeks: number
  readonly answers: number
  readonly days: number
  readonly mails: number
  readonly calendar: boolean
}

/** A page's worth: how much of each there is. */
export async function loadKept(db: OrgDb, nowMs: number): Promise<readonly KeptTenancy[]> {
  const found: KeptTenancy[] = []
  for (const home of await everyTenancy(db, nowMs)) {
    const { weeks, answers, days, mails, feed } = await entriesOf(db, home, nowMs)
    const counts = { weeks: weeks.length, answers: answers.length, days: days.length, mails: mails.length }
    found.push({ home, ...counts, calendar: feed !== null })
  }
  return found
}

/** Everything, as plain data with instants in UTC and days local; the secret of a calendar address stays out of a file that travels. */
export async function exportKept(db: OrgDb, nowMs: number) {
  const personId = actingPerson(db)
  const own = (await listMembers(db)).filter((member) => member.personId === personId)
  const [me] = own
  if (!me) throw notFound('account of yours')
  const at = (instantMs: number): string => new Date(instantMs).toISOString()
  const tenancies = []
  for (const home of await everyTenancy(db, nowMs)) {
    const { tenancy, unit, property } = home
    const { weeks, answers, days, mails, feed } = await entriesOf(db, home, nowMs)
    tenancies.push({
      unit: unit.code,
      property: property.name,
      zone: property.zone,
      name: tenancy.name,
      email: tenancy.email,
      fromDay: tenancy.fromDay,
      toDay: tenancy.toDay,
      mails: tenancy.tips,
      weeks: weeks.map(({ setAtMs, setBy, week, willing }) => ({
        setAt: at(setAtMs),
        setBy: setBy === personId ? 'you' : 'whoever runs the building',
        mondayFirst: week,
        hoursWillingToPress: willing,
      })),
      answers: answers.map(({ day, verdict, givenAtMs }) => ({ day, verdict, givenAt: at(givenAtMs) })),
      computedDays: days.map(({ day, status, outcome }) => ({
        day,
        status,
        showers: outcome.needs.map(({ need, status: served, startByMin }) => ({
          at: clockWords(need.readyByMin, outcome.clockChange),
          count: need.count,
          minutesEach: need.minutesEach,
          pressBy: startByMin === null ? null : clockWords(startByMin, outcome.clockChange),
          served,
        })),
      })),
      mailsAboutShowers: mails.map(({ queuedAtMs, subject, state }) => ({ queuedAt: at(queuedAtMs), subject, state })),
      calendarAddressSince: feed && at(feed.createdAtMs),
    })
  }
  return { writtenAt: at(nowMs), account: { name: me.name, email: me.email, roles: own.map(({ role }) => role) }, tenancies }
}

async function everyTenancy(db: OrgDb, nowMs: number): Promise<readonly Home[]> {
  const { open, over } = await ownTenancies(db, nowMs)
  return [...open, ...over]
}

async function entriesOf(db: OrgDb, { tenancy, unit, property }: Home, nowMs: number) {
  const traces = tracesOf({ tenancy, property, nowMs })
  const days = await listUnitEvaluations(db, unit.id, traces.fromDay, traces.toDay)
  return {
    weeks: await listWeeks(db, tenancy.id),
    answers: await listAnsweredDays(db, { tenancyId: tenancy.id }, traces.fromDay),
    days: days.filter(({ outcome }) => outcome.needs.length > 0),
    mails: await listShowerMails(db, traces),
    feed: await findFeed(db, tenancy.id),
  }
}
