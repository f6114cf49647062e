/** The landlord's draft on the table: where each run starts, what is pinned, what can be taken back. Pure; the island holds it. */
import { instantOf } from '#lib/core/time/civil.ts'
import type { PlannedRun } from '#lib/core/plan/types.ts'
import type { PlanDraft } from './draft-plan.server.ts'
import { type MovableRun, slotAt, startMsOf } from './types.ts'
import type { FoundPlan, Pin } from './worker-messages.ts'

export interface Desk {
  readonly draft: PlanDraft
  readonly found: FoundPlan
  readonly starts: ReadonlyMap<string, number>
  readonly pinned: ReadonlySet<string>
  /** Starts before each move, oldest first. */
  readonly past: readonly ReadonlyMap<string, number>[]
}

const MOST_STEPS = 100

export const startMap = (starts: readonly PlannedRun[]): ReadonlyMap<string, number> =>
  new Map(starts.map(({ runId, startSlot }) => [runId, startSlot]))
export const asStarts = (starts: ReadonlyMap<string, number>): readonly PlannedRun[] =>
  [...starts].map(([runId, startSlot]) => ({ runId, startSlot }))

export const newDesk = (draft: PlanDraft, found: FoundPlan, pinned: ReadonlySet<string>): Desk => ({
  draft,
  found,
  starts: startMap(found.starts),
  pinned,
  past: [],
})

export const moved = (desk: Desk, runId: string, slot: number): Desk =>
  desk.starts.get(runId) === slot
    ? desk
    : { ...desk, starts: new Map(desk.starts).set(runId, slot), past: [...desk.past.slice(-MOST_STEPS + 1), desk.starts] }

export function tookBack(desk: Desk): Desk {
  const before = desk.past.at(-1)
  return before ? { ...desk, starts: before, past: desk.past.slice(0, -1) } : desk
}

export const pinToggled = (desk: Desk, runId: string): Desk => {
  const pinned = new Set(desk.pinned)
  if (!pinned.delete(runId)) pinned.add(runId)
  return { ...desk, pinned }
}

export const pinsOf = ({ starts, pinned }: Pick<Desk, 'starts' | 'pinned'>): readonly Pin[] =>
  [...pinned].flatMap((runId) => {
    const slot = starts.get(runId)
    return slot === undefined ? [] : [{ runId, slot }]
  })

export const startsAt = ({ draft, starts }: Pick<Desk, 'draft' | 'starts'>, run: MovableRun): number =>
  startMsOf(draft.grid, run, starts.get(run.id) ?? slotAt(draft.grid, run.todayMs))

/** The same starts on newer records: what is still there keeps the minute it was given. */
export function rebased(desk: Desk, draft: PlanDraft, found: FoundPlan): Desk {
  const wanted = new Map(desk.draft.runs.map((run) => [run.id, startsAt(desk, run)]))
  const starts = new Map(draft.runs.map((run) => [run.id, slotAt(draft.grid, wanted.get(run.id) ?? run.todayMs)]))
  const ids = new Set(draft.runs.map(({ id }) => id))
  return { draft, found, starts, pinned: new Set([...desk.pinned].filter((id) => ids.has(id))), past: [] }
}

/** What is sent to be accepted. */
export const acceptBody = (desk: Desk) => ({
  from: desk.draft.fromDay,
  to: desk.draft.toDay,
  revision: desk.draft.revision,
  starts: desk.draft.runs.map((run) => ({ id: run.id, seenMs: run.todayMs, startsAtMs: startsAt(desk, run) })),
})

/** The slot of a time as somebody types it: on the need's day, or on its eve where only that can be meant. */
export function typedSlot({ draft }: Pick<Desk, 'draft'>, run: MovableRun, minuteOfDay: number): number {
  const onDay = instantOf(run.day, minuteOfDay, draft.zone)
  const eve = onDay - 86_400_000
  const far = (instantMs: number) => Math.max(run.earliestMs - instantMs, instantMs - run.latestMs, 0)
  return slotAt(draft.grid, far(eve) < far(onDay) ? eve : onDay)
}
