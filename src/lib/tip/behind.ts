/** Why a tenant is told what they are told, in one line: how the run compares with what the showers need. */
import type { NeedOutcome } from '#lib/core/tank/types.ts'
import type { At } from './tip.ts'

/** Closer than this, somebody who presses late notices. */
const TIGHT_MIN = 5

export function behindOf(needs: readonly NeedOutcome[], { at, pressed }: { readonly at: At; readonly pressed: boolean }): string {
  const short = needs.find((need) => need.status !== 'ready')
  if (short) return short.reason
  const tightest = needs.reduce<NeedOutcome | null>((best, need) => (best === null || spareMin(need) < spareMin(best) ? need : best), null)
  if (!tightest) return ''
  if (!pressed) return switchWords(needs, at)
  const run = `Your timer runs at least ${Math.floor(tightest.chosenRunMin)} minutes`
  if (needs.some((need) => need.agreed)) return 'The heaters of the house take turns: this is the start agreed for yours.'
  const spare = spareMin(tightest)
  const reach = spare < TIGHT_MIN ? 'that just reaches it' : `${spare} more than the showers need`
  // A start that could not be later than the shower itself leaves nothing to warn of.
  const last = tightest.need.count > 1 ? 'last shower' : 'shower'
  const late =
    tightest.startByMin !== null && tightest.startByMin < tightest.need.readyByMin ? ` Any later and the ${last} turns cool.` : ''
  return `${run}: ${reach}.${late}`
}

/** A run that serves several needs is named once. */
function switchWords(needs: readonly NeedOutcome[], at: At): string {
  const runs = new Set(needs.flatMap(({ run }) => (run ? [`from ${at(run.startMin)} to ${at(run.endMin)}`] : [])))
  return runs.size === 0 ? '' : `The switch is on ${[...runs].join(' and ')}.`
}

const spareMin = ({ chosenRunMin, requiredRunMin }: NeedOutcome): number =>
  Math.max(0, Math.floor(chosenRunMin) - Math.ceil(requiredRunMin ?? 0))
