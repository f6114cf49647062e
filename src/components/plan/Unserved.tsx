/** Who has no start under the limit, why, and the smallest change that would give them one; and what stays whatever is planned. */
import { counted } from '#lib/figures.ts'
import type { PlanDraft } from '#lib/plan/draft-plan.server.ts'
import { changeWords, dayWords, FIXED_WORDS, startWords, UNSERVED_WORDS } from '#lib/plan/words.ts'
import type { FoundPlan } from '#lib/plan/worker-messages.ts'
import type { FixedReason } from '#lib/plan/types.ts'

interface Props {
  readonly draft: PlanDraft
  readonly found: FoundPlan
}

export function Unserved({ draft, found }: Props) {
  const runs = new Map(draft.runs.map((run) => [run.id, run]))
  if (found.unserved.length === 0) return null
  return (
    <section className="ledger" aria-labelledby="unserved">
      <h2 id="unserved" className="text-lead">
        {counted(found.unserved.length, 'start')} without room under the limit
      </h2>
      <p className="py-2">
        Each keeps the start that it has: hot water is never withheld. The limit stays passed there until one of these is changed.
        {found.bound.unservedAtLeast >= found.unserved.length ? ' No plan has room for more.' : ''}
      </p>
      <ul>
        {found.unserved.map(({ needId, reason, changes }) => {
          const run = runs.get(needId)
          if (!run) return null
          return (
            <li key={needId} className="border-t border-rule py-2">
              <b className="font-black">{run.code}</b>, {dayWords(run.day)}, starts at {startWords(run.todayMs, run.day, draft.zone)}:{' '}
              {UNSERVED_WORDS[reason]}.{' '}
              {changes.length === 0
                ? 'No single change would give it a place.'
                : `It would have a place with ${changes.map((change) => changeWords(change, { grid: draft.grid, run, zone: draft.zone })).join('; or ')}.`}
            </li>
          )
        })}
      </ul>
    </section>
  )
}

/** Runs that a plan cannot move, by the reason. */
export function Staying({ draft }: Pick<Props, 'draft'>) {
  const codes = new Map<FixedReason, Set<string>>()
  for (const { why, code } of draft.fixed) codes.set(why, (codes.get(why) ?? new Set()).add(code))
  if (codes.size === 0 && draft.unknownUnits === 0) return null
  return (
    <section className="ledger" aria-labelledby="staying">
      <h2 id="staying" className="text-lead">
        What stays as it is
      </h2>
      <ul>
        {[...codes].map(([why, units]) => (
          <li key={why} className="border-t border-rule py-2">
            <b>{listed([...units])}</b>: {FIXED_WORDS[why]}. Counted as load that is there.
          </li>
        ))}
        {draft.unknownUnits > 0 && (
          <li className="border-t border-rule py-2">
            Of {counted(draft.unknownUnits, 'unit')} the heater or the showers are not on record: their load is not in these figures.
          </li>
        )}
      </ul>
    </section>
  )
}

const SHOWN = 12
const listed = (codes: readonly string[]): string =>
  codes.length <= SHOWN ? codes.join(', ') : `${codes.slice(0, SHOWN).join(', ')} and ${codes.length - SHOWN} more`
