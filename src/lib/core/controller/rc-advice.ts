/** The resistor and capacitor, from stocked preferred values, whose guaranteed run reaches the minutes needed and always ends. */
import { meets, MOST_SUGGESTIONS, none, type PartsAdvice, type RunNeed, spanWords, type Suggestion } from './advice.ts'
import { CAPACITOR_SERIES } from './capacitors.ts'
import { formatFarad, formatOhm } from './describe.ts'
import { publishedMaxOhm } from './max-resistance.ts'
import { rcCorners, rcDuration } from './one-shot-rc.ts'
import { isE12 } from './preferred-values.ts'
import { type Candidate, rcCandidates } from './rc-parts.ts'
import { guaranteedRange } from './rc-outcome.ts'
import { runDuration } from './run-duration.ts'
import type { DurationRange, OneShotRcController } from './types.ts'

/** Nominal runs beyond this multiple of the need are not looked at when the nearest is told. */
const NEAREST_WITHIN = 4

interface Checked {
  readonly candidate: Candidate
  readonly guaranteed: DurationRange
}

export function rcAdvice(installed: OneShotRcController, need: RunNeed): PartsAdvice {
  const best = new Map<string, Checked>()
  // A guaranteed minimum never passes the nominal run and a guaranteed maximum never stays under it: what lies outside cannot do.
  for (const candidate of rcCandidates(installed, { fromMin: need.minMin, toMin: need.limitMin })) {
    const checked = { candidate, guaranteed: guaranteedRange(candidate.timer) }
    const { minMin, maxMin } = checked.guaranteed
    if (minMin < need.minMin || maxMin === null || maxMin > need.limitMin) continue
    const kind = kindOf(candidate)
    const other = best.get(kind)
    if (!other || compare(checked, other) < 0) best.set(kind, checked)
  }
  const suggestions = [...best.values()].sort(compare).slice(0, MOST_SUGGESTIONS).map(toSuggestion)
  // The search looked at the range alone; what is named has been through the whole model.
  const confirmed = suggestions.filter(({ duration }) => meets(duration, need))
  return confirmed.length > 0 ? { status: 'found', suggestions: confirmed } : none(whyNone(need, nearest(installed, need)))
}

/** What comes nearest: of all that surely ends the longest, and where that is long enough the one with the lowest end. */
function nearest(installed: OneShotRcController, { minMin }: RunNeed): Checked | null {
  let found: Checked | null = null
  for (const candidate of rcCandidates(installed, { fromMin: 0, toMin: minMin * NEAREST_WITHIN })) {
    const enough = (one: Checked | null) => one !== null && one.guaranteed.minMin >= minMin
    const nominalMin = (candidate.timer.resistanceOhm * candidate.timer.capacitanceF * Math.log(3)) / 60
    // Neither a shorter one nor, once one is long enough, one that cannot end sooner is looked at.
    if (found && (enough(found) ? nominalMin >= (found.guaranteed.maxMin ?? Infinity) : nominalMin <= found.guaranteed.minMin)) continue
    const checked = { candidate, guaranteed: guaranteedRange(candidate.timer) }
    if (checked.guaranteed.maxMin === null || (enough(found) && !enough(checked))) continue
    const nearer: boolean =
      found === null ||
      (enough(checked)
        ? !enough(found) || checked.guaranteed.maxMin < (found.guaranteed.maxMin ?? Infinity)
        : checked.guaranteed.minMin > found.guaranteed.minMin)
    if (nearer) found = checked
  }
  return found
}

/** One suggestion a way of doing it: which parts are changed, which series, how many pieces. */
const kindOf = ({ changes, capacitor }: Candidate): string => `${changes.join()} ${capacitor?.series ?? ''} ${capacitor?.pieces ?? 0}`

/** Fewer parts to change, then fewer pieces, then values that every shop has, then the least over what is needed. */
function compare(one: Checked, other: Checked): number {
  const key = ({ candidate, guaranteed }: Checked) => [
    candidate.changes.length,
    candidate.capacitor?.pieces ?? 0,
    isE12(candidate.timer.resistanceOhm) ? 0 : 1,
    guaranteed.maxMin ?? Infinity,
  ]
  const [mine, theirs] = [key(one), key(other)]
  const at = mine.findIndex((value, index) => value !== theirs[index])
  return at < 0 ? 0 : (mine[at] ?? 0) - (theirs[at] ?? 0)
}

function toSuggestion({ candidate }: Checked): Suggestion {
  const { timer, changes } = candidate
  const duration = runDuration(timer, [])
  const resistor = `${formatOhm(timer.resistanceOhm)}, ±${percent(timer.resistanceToleranceFraction)}, ${isE12(timer.resistanceOhm) ? 'E12' : 'E24'}`
  const parts = [
    ...(changes.includes('resistor') ? [`a ${formatOhm(timer.resistanceOhm)} timing resistor`] : []),
    ...(changes.includes('capacitor') ? [capacitorWords(candidate)] : []),
    ...(changes.includes('chip') ? ['a CMOS chip'] : []),
  ]
  const kept = [
    ...(changes.includes('resistor') ? [] : [`the ${formatOhm(timer.resistanceOhm)} resistor`]),
    ...(changes.includes('capacitor') ? [] : [`the ${formatFarad(timer.capacitanceF)} capacitor`]),
  ]
  const worst = rcDuration(rcCorners(timer).longest)
  return {
    controller: timer,
    what: `Fit ${listed(parts)}${kept.length > 0 ? `; keep ${listed(kept)}` : ''}`,
    duration,
    reason: [
      `It then runs ${spanWords(duration)}, parts and leakage at their published limits.`,
      `${resistor}: under ${formatOhm(publishedMaxOhm(timer))}, the most the makers’ rule allows at ${timer.supplyV} V.`,
      `At the limits the capacitor still settles at ${worst.settlesAtV.toFixed(1)} V, above the ${worst.thresholdV.toFixed(1)} V at which the run ends.`,
      ...(changes.includes('chip') ? ['A CMOS chip gives less current than a bipolar one: see that it still drives the coil.'] : []),
    ].join(' '),
  }
}

function capacitorWords({ capacitor, timer }: Candidate): string {
  if (!capacitor) return `the ${formatFarad(timer.capacitanceF)} capacitor`
  const { name, stock } = CAPACITOR_SERIES[capacitor.series]
  const each = `${formatFarad(capacitor.eachF)} ${name}, ${stock.ratedV} V, ±${percent(stock.toleranceFraction)}`
  return capacitor.pieces === 1 ? `a capacitor of ${each}` : `${capacitor.pieces} capacitors side by side, each ${each}`
}

function whyNone({ minMin, limitMin }: RunNeed, best: Checked | null): string {
  const needed = `${Math.ceil(minMin)} min`
  const instead = `Fit a timer of fixed length for ${needed} instead.`
  if (!best) return `No stocked resistor and capacitor surely stop. ${instead}`
  const { guaranteed, candidate } = best
  const parts = `${formatOhm(candidate.timer.resistanceOhm)} and ${capacitorWords(candidate)}: ${spanWords({ guaranteed })}`
  return guaranteed.minMin < minMin
    ? `No stocked resistor and capacitor surely run ${needed} and surely stop. The longest that do are ${parts}. Longer ones leak too much or need a resistor above the makers’ rule. ${instead}`
    : `Stocked parts spread too widely: of those that surely run ${needed} the closest are ${parts}; at most ${Math.floor(limitMin)} min are wanted. ${instead}`
}

const percent = (fraction: number): string => `${Number((fraction * 100).toPrecision(3))} %`
const listed = (items: readonly string[]): string =>
  items.length < 2 ? items.join('') : `${items.slice(0, -1).join(', ')} and ${items.at(-1) ?? ''}`
