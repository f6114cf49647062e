/** What changed since a draft was made, line by line, so that nothing has to be guessed or drawn again; `null` when nothing did. */
import type { OrgDb } from '#db/org-db.ts'
import type { AcceptedPlan } from '#db/queries/plan.ts'
import type { Property } from '#db/queries/property.ts'
import { listMembers } from '#db/queries/organisation.ts'
import { formatInstant } from '#lib/format.ts'
import { AppError } from '#lib/http/app-error.ts'
import type { Gathered } from './gather-plan.server.ts'
import type { AcceptPlanInput } from './schemas.ts'
import { dayWords, startWords } from './words.ts'

interface Seen {
  readonly property: Property
  readonly gathered: Gathered
  readonly wanted: AcceptPlanInput
}

export async function movedOn(db: OrgDb, { property, gathered, wanted }: Seen): Promise<AppError | null> {
  const { question, plans, revision } = gathered
  const { zone } = property
  const seen = new Map(wanted.starts.map((start) => [start.id, start.seenMs]))
  const runs = new Set(question.runs.map(({ id }) => id))
  const lines = [
    ...(revision === wanted.revision ? [] : await eventLines(db, plans, property)),
    ...question.runs.flatMap((run) => {
      const seenMs = seen.get(run.id)
      const now = startWords(run.todayMs, run.day, zone)
      if (seenMs === undefined) return [`${run.code}, ${dayWords(run.day)}: a run from ${now} is new.`]
      return seenMs === run.todayMs
        ? []
        : [`${run.code}, ${dayWords(run.day)}: starts at ${now} now; it was ${startWords(seenMs, run.day, zone)}.`]
    }),
    ...(wanted.starts.some(({ id }) => !runs.has(id))
      ? [`${wanted.starts.filter(({ id }) => !runs.has(id)).length} of the draft’s runs are not there any more, or may not be moved.`]
      : []),
  ]
  if (lines.length === 0) return null
  const fields = lines.map((message) => ({ field: 'revision', message }))
  return new AppError('conflict', 'Something changed after you asked for this plan. Yours is not accepted, and it is still here.', {
    fields,
  })
}

/** Who accepted or undid the newest plan, and when. */
async function eventLines(db: OrgDb, plans: readonly AcceptedPlan[], { zone }: Property): Promise<readonly string[]> {
  const [newest] = [...plans].sort((one, other) => (other.undoneAtMs ?? other.acceptedAtMs) - (one.undoneAtMs ?? one.acceptedAtMs))
  if (!newest) return []
  const names = new Map((await listMembers(db)).map((member) => [member.personId, member.name]))
  const by = newest.undoneAtMs === null ? newest.acceptedBy : newest.undoneBy
  const who = (by && names.get(by)) ?? 'Somebody'
  const when = formatInstant(newest.undoneAtMs ?? newest.acceptedAtMs, zone, 'EEEE d MMMM, HH:mm')
  return [`${who} ${newest.undoneAtMs === null ? 'accepted' : 'undid'} plan ${newest.number} on ${when}.`]
}
