/** The planner's desk: asking, comparing, moving by hand with the effect at once, pinning, accepting. The thinking is in the worker. */
import { useMemo } from 'react'
import { type Figures, movedRuns, passesMore, unitsOutside } from '#lib/plan/compare.ts'
import { asStarts, type Desk, startsAt, typedSlot } from '#lib/plan/desk.ts'
import { slotAt } from '#lib/plan/types.ts'
import { answerWords } from '#lib/plan/view.ts'
import { AcceptPanel } from './AcceptPanel.tsx'
import { AskForm, type DayChoice } from './AskForm.tsx'
import { Comparison } from './Comparison.tsx'
import { Lanes } from './Lanes.tsx'
import { RunPanel } from './RunPanel.tsx'
import { Staying, Unserved } from './Unserved.tsx'
import { usePlanDesk } from './use-plan-desk.ts'

interface Props {
  /** `/api/o/<slug>/p/<property>/plan` */
  readonly api: string
  readonly planHref: string
  readonly unitsHref: string
  readonly days: readonly DayChoice[]
  readonly weekEnd: string
}

export default function PlanIsland({ api, planHref, unitsHref, days, weekEnd }: Props) {
  const at = usePlanDesk({ api, planHref })
  const { desk, yours, stage, chosen, failure, isEdited } = at
  const changes = useMemo(() => (desk ? movedRuns(desk.draft, asStarts(desk.starts)) : []), [desk])
  const planChanges = useMemo(() => (desk ? movedRuns(desk.draft, desk.found.starts).length : 0), [desk])
  const blocked = useMemo(() => (desk && yours ? blockedBecause(desk, yours) : ''), [desk, yours])

  return (
    <div className="flex flex-col gap-8">
      <AskForm days={days} weekEnd={weekEnd} stage={stage} onAsk={(asked) => void at.ask(asked)} onStop={at.stop} />
      <p className="sr-only" role="status" aria-live="polite">
        {at.said}
      </p>
      {failure && !desk && (
        <div className="border-l-4 border-crimson bg-sheet px-4 py-3" role="alert">
          <p className="font-bold">{failure.message}</p>
          {failure.lines.map((line) => (
            <p key={line}>{line}</p>
          ))}
        </div>
      )}
      {desk && yours && (
        <>
          <p className="text-lead">{answerWords({ draft: desk.draft, found: desk.found, unserved: desk.found.unserved.length })}</p>
          <Comparison
            isEdited={isEdited}
            sides={{
              draft: desk.draft,
              found: desk.found,
              yours,
              planChanges,
              yourChanges: changes.length,
              yourCold: unitsOutside(changes),
              unserved: desk.found.unserved.length,
            }}
          />
          <Unserved draft={desk.draft} found={desk.found} />
          <div className="flex flex-wrap gap-3 print:hidden">
            <button type="button" className="button" disabled={desk.past.length === 0} onClick={at.takeBack}>
              Take the last move back
            </button>
            <button type="button" className="button" disabled={!isEdited} onClick={at.backToPlan}>
              Back to the plan
            </button>
            <button type="button" className="button" disabled={desk.pinned.size === 0 || stage !== null} onClick={at.planAgain}>
              Plan again around the pins
            </button>
          </div>
          <Lanes
            key={desk.draft.fromDay + desk.draft.toDay}
            desk={desk}
            yours={yours}
            chosenId={chosen?.id ?? null}
            panel={
              chosen && (
                <RunPanel
                  draft={desk.draft}
                  run={chosen}
                  startsAtMs={startsAt(desk, chosen)}
                  isPinned={desk.pinned.has(chosen.id)}
                  unitsHref={unitsHref}
                  effect={at.effect}
                  water={at.water}
                  onType={(minuteOfDay) => at.moveTo(chosen, typedSlot(desk, chosen, minuteOfDay))}
                  onPin={() => at.pin(chosen)}
                />
              )
            }
            onTry={at.tryAt}
            onMove={at.moveTo}
            onPin={at.pin}
            onChoose={at.open}
          />
          <AcceptPanel
            moved={changes}
            zone={desk.draft.zone}
            blocked={blocked}
            failure={failure}
            isSaving={at.isSaving || stage !== null}
            onAccept={() => void at.accept()}
            onDiscard={at.discard}
          />
          <Staying draft={desk.draft} />
        </>
      )}
    </div>
  )
}

function blockedBecause({ draft, starts, found }: Desk, yours: Figures): string {
  const today = new Map(draft.runs.map((run) => [run.id, slotAt(draft.grid, run.todayMs)]))
  const runs = new Map(draft.runs.map((run) => [run.id, run.code]))
  const not = yours.notAllowed.filter((id) => today.get(id) !== starts.get(id)).map((id) => runs.get(id) ?? '')
  if (not.length > 0) return `Not acceptable yet: the start of ${not.slice(0, 5).join(', ')} is not possible.`
  return passesMore(found.today, yours) ? 'Not acceptable yet: these starts pass the limit by more than the present ones.' : ''
}
