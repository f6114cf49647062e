/** Every check's verdict as one types: figure, limit, clause, caution, and whether the limit is to be confirmed. */
import { PROFILES } from '#lib/core/hardware/check-hardware.ts'
import type { Check, ProfileId, Verdict } from '#lib/core/hardware/types.ts'
import { MAINS_CAUTION } from '#lib/core/hardware/verdict.ts'
import { VERDICT_WORDS } from '#lib/hardware/view.ts'

const ORDER: readonly Verdict[] = ['fail', 'attention', 'not-known', 'pass']
const TONE: Readonly<Record<Verdict, string>> = {
  fail: 'font-bold text-crimson',
  attention: 'font-bold',
  'not-known': '',
  pass: 'text-verdigris',
}

export function CheckList({ checks, profile }: { readonly checks: readonly Check[]; readonly profile: ProfileId }) {
  const sorted = [...checks].sort((one, other) => ORDER.indexOf(one.verdict) - ORDER.indexOf(other.verdict))
  const counts = ORDER.map((verdict) => [verdict, checks.filter((one) => one.verdict === verdict).length] as const)
  const { name, defers } = PROFILES[profile]
  return (
    <section className="flex flex-col gap-3" aria-labelledby="checks">
      <h2 id="checks">Checks against {name}</h2>
      <p role="status">
        {counts
          .filter(([, count]) => count > 0)
          .map(([verdict, count]) => `${count} ${VERDICT_WORDS[verdict]}`)
          .join(', ')}
        .
      </p>
      <p className="border-l-4 border-ink bg-sheet px-4 py-3 text-small">
        {MAINS_CAUTION} {defers} Dwellhour screens; it does not certify.
      </p>
      <div className="ledger">
        {sorted.map((check) => (
          <CheckEntry key={check.id} check={check} />
        ))}
      </div>
    </section>
  )
}

function CheckEntry({ check }: { readonly check: Check }) {
  const own = check.caution.replace(MAINS_CAUTION, '').trim()
  return (
    <div className={check.verdict === 'fail' ? 'border-l-4 border-crimson py-2 pl-3' : 'py-2'}>
      <p>
        <span className="font-bold">{check.title}</span>: <span className={TONE[check.verdict]}>{VERDICT_WORDS[check.verdict]}</span>
      </p>
      <p className="text-small">
        Found: {check.figure}. Limit: {check.limit}. {check.reason}
      </p>
      <p className="text-small text-soft">
        {check.clause}. {check.confirmAgainstCode && <strong>Confirm against your code.</strong>}
      </p>
      {own && <p className="text-small">Caution: {own}</p>}
    </div>
  )
}
