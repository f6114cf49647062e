/** What the planner's page holds and does: asks, lays starts, tries moves, accepts, and lays a draft on newer records. */
import { useEffect, useRef, useState } from 'react'
import { ApiProblem, apiGet, apiSend } from '#lib/http/client.ts'
import type { Figures } from '#lib/plan/compare.ts'
import {
  acceptBody,
  asStarts,
  type Desk,
  moved,
  newDesk,
  pinsOf,
  pinToggled,
  rebased,
  startMap,
  startsAt,
  tookBack,
} from '#lib/plan/desk.ts'
import type { PlanDraft } from '#lib/plan/draft-plan.server.ts'
import { type MovableRun, slotAt } from '#lib/plan/types.ts'
import { answerWords, effectWords, startText } from '#lib/plan/view.ts'
import type { WaterWeek } from '#lib/plan/water.ts'
import type { Answered, Pin } from '#lib/plan/worker-messages.ts'
import type { Failure } from './AcceptPanel.tsx'
import type { Days } from './AskForm.tsx'
import { usePlanner } from './use-planner.ts'

interface Asking {
  readonly draft: PlanDraft
  readonly pinned: ReadonlySet<string>
  /** Starts to lay on newer records once they are planned. */
  readonly onto: Desk | null
}
interface Places {
  /** `/api/o/<slug>/p/<property>/plan` */
  readonly api: string
  readonly planHref: string
}

export function usePlanDesk({ api, planHref }: Places) {
  const [desk, setDesk] = useState<Desk | null>(null)
  const [yours, setYours] = useState<Figures | null>(null)
  const [stage, setStage] = useState<number | null>(null)
  const [chosen, choose] = useState<MovableRun | null>(null)
  const [said, say] = useState('')
  const [effect, setEffect] = useState('')
  const [water, setWater] = useState('')
  const [failure, setFailure] = useState<Failure | null>(null)
  const [isSaving, setIsSaving] = useState(false)
  const asking = useRef<Asking | null>(null)
  const tried = useRef<MovableRun | null>(null)
  const weeks = useRef(new Map<string, Promise<WaterWeek>>())
  const isLeaving = useRef(false)

  const planner = usePlanner(hear, (message) => {
    setStage(null)
    setFailure({ message, lines: [], isConflict: false })
  })

  function hear(answer: Answered): void {
    switch (answer.kind) {
      case 'found': {
        const asked = asking.current
        if (!asked) return
        const next = asked.onto ? rebased(asked.onto, asked.draft, answer.found) : newDesk(asked.draft, answer.found, asked.pinned)
        setDesk(next)
        setYours(answer.found.figures)
        setStage(answer.isLast ? null : 2)
        if (asked.onto && answer.isLast) planner.ask({ kind: 'lay', question: null, starts: asStarts(next.starts) })
        if (answer.isLast) say(answerWords({ draft: asked.draft, found: answer.found, unserved: answer.found.unserved.length }))
        return
      }
      case 'invalid':
        setStage(null)
        setFailure({
          message: 'These records cannot be planned. Nothing was changed.',
          lines: answer.faults.slice(0, 5).map(({ where, message }) => `${where} ${message}`),
          isConflict: false,
        })
        return
      case 'figures':
        setYours(answer.figures)
        return
      case 'effect': {
        if (!answer.effect || !desk || !tried.current) return
        const words = effectWords(answer.effect, { draft: desk.draft, run: tried.current })
        setEffect(words)
        say(words)
        return
      }
      case 'verdict':
        setWater(
          answer.verdict && !answer.verdict.servesAll
            ? `The tank would serve ${Math.floor(answer.verdict.minutesServed)} of ${answer.verdict.minutesWanted} minutes warm: ${chosen?.code ?? 'it'} would be cold.`
            : '',
        )
    }
  }

  async function ask({ from, to }: Days, onto: Desk | null = null): Promise<void> {
    setStage(0)
    if (!onto) setFailure(null)
    try {
      const draft = await apiGet<PlanDraft>(`${api}?from=${from}&to=${to}`)
      asking.current = { draft, pinned: new Set(), onto }
      weeks.current.clear()
      if (!onto) {
        setDesk(null)
        choose(null)
      }
      if (draft.runs.length === 0) {
        setStage(null)
        setFailure({ message: 'No run of these days may be moved: there is nothing to plan.', lines: [], isConflict: false })
        return
      }
      setStage(1)
      planner.ask({ kind: 'plan', question: draft, pins: onto ? pinsStillThere(onto, draft) : [] })
    } catch (error) {
      setStage(null)
      setFailure(failureOf(error))
    }
  }

  function planAgain(): void {
    if (!desk) return
    asking.current = { draft: desk.draft, pinned: desk.pinned, onto: null }
    setStage(1)
    planner.ask({ kind: 'plan', question: desk.draft, pins: pinsOf(desk) })
  }

  function lay(next: Desk): void {
    setDesk(next)
    planner.ask({ kind: 'lay', question: null, starts: asStarts(next.starts) })
  }

  function tryAt(run: MovableRun, slot: number): void {
    tried.current = run
    planner.ask({ kind: 'try', runId: run.id, slot })
  }

  function moveTo(run: MovableRun, slot: number): void {
    if (!desk) return
    tryAt(run, slot)
    const next = moved(desk, run.id, slot)
    lay(next)
    setFailure((old) => (old?.isConflict ? old : null))
    askWater(next, run)
  }

  /** Only where the tank's own window does not answer it. */
  function askWater(next: Desk, run: MovableRun): void {
    setWater('')
    const startsAtMs = startsAt(next, run)
    if (startsAtMs >= Math.min(run.earliestMs, run.todayMs) && startsAtMs <= run.latestMs) return
    const known = weeks.current.get(run.code) ?? apiGet<WaterWeek>(`${api}/water?unit=${encodeURIComponent(run.code)}`)
    weeks.current.set(run.code, known)
    const starts = next.draft.runs
      .filter(({ unitId }) => unitId === run.unitId)
      .map((one) => [one.readyByAtMs, startsAt(next, one)] as const)
    known
      .then((week) => planner.ask({ kind: 'water', week, readyByAtMs: run.readyByAtMs, starts }))
      .catch(() => setWater('What its water would be could not be read; the start is not possible as it is.'))
  }

  async function accept(): Promise<void> {
    if (!desk) return
    setIsSaving(true)
    try {
      const { number, told } = await apiSend<{ number: number; told: number }>('POST', api, acceptBody(desk))
      isLeaving.current = true
      window.location.assign(`${planHref}?accepted=${number}&told=${told}`)
    } catch (error) {
      const refused = failureOf(error)
      setFailure(refused)
      setIsSaving(false)
      // From now on what changed is known: accepting again is a decision and no accident.
      if (refused.isConflict) await ask({ from: desk.draft.fromDay, to: desk.draft.toDay }, desk)
    }
  }

  const isEdited = desk !== null && (desk.past.length > 0 || desk.pinned.size > 0 || asking.current?.onto !== null)
  useEffect(() => {
    const warn = (event: BeforeUnloadEvent) => {
      if (!isLeaving.current) event.preventDefault()
    }
    if (isEdited) window.addEventListener('beforeunload', warn)
    return () => window.removeEventListener('beforeunload', warn)
  }, [isEdited])

  const stop = () => {
    planner.stop()
    setStage(null)
    // What was found stays on the table; a fresh worker takes it in.
    if (desk) planner.ask({ kind: 'lay', question: desk.draft, starts: asStarts(desk.starts) })
  }
  const pin = (run: MovableRun) => {
    if (!desk) return
    setDesk(pinToggled(desk, run.id))
    const isFree = desk.pinned.has(run.id)
    say(`${run.code} ${isFree ? 'is free again' : `pinned at ${startText(run, startsAt(desk, run), desk.draft.zone)}`}.`)
  }
  const open = (run: MovableRun) => {
    choose(run.id === chosen?.id ? null : run)
    setEffect('')
    if (desk) askWater(desk, run)
  }
  const discard = () => {
    setDesk(null)
    choose(null)
    setFailure(null)
  }
  const takeBack = () => desk && lay(tookBack(desk))
  const backToPlan = () => desk && lay({ ...desk, starts: startMap(desk.found.starts), past: [...desk.past, desk.starts] })
  return {
    ...{ desk, yours, stage, chosen, said, effect, water, failure, isSaving, isEdited },
    ...{ ask, stop, planAgain, tryAt, moveTo, pin, open, accept, discard, takeBack, backToPlan },
  }
}

/** Pins keep the minute they were given, on the newer grid. */
function pinsStillThere(desk: Desk, draft: PlanDraft): readonly Pin[] {
  const runs = new Map(desk.draft.runs.map((run) => [run.id, run]))
  return draft.runs.flatMap((run) => {
    const known = runs.get(run.id)
    return known && desk.pinned.has(run.id) ? [{ runId: run.id, slot: slotAt(draft.grid, startsAt(desk, known)) }] : []
  })
}

function failureOf(error: unknown): Failure {
  const isProblem = error instanceof ApiProblem
  return {
    message: error instanceof Error ? error.message : 'It was not accepted.',
    lines: isProblem && error.status === 409 ? error.fields.map((one) => one.message) : [],
    isConflict: isProblem && error.status === 409,
  }
}
