/** The resistor and capacitor, from stocked preferred values, whose guaranteed run reaches the minutes needed and always ends. */
import { meets, MOST_SUGGESTIONS, none, type PartsAdvice, type RunNeed, spanWords, type Suggestion } from './advice.ts'
import { CAPACITOR_SERIES } from './capacitors.ts'
import { formatFarad, formatOhm } from './describe.ts'
import { publishedMaxOhm } from './max-resistance.ts'
import { rcCorners, rcDuration } from './one-shot-rc.ts'
import { isE12 } from './preferred-values.ts'
import { type Candidate, rcCandidates } from './rc-parts.ts'
import { runDuration } from './run-duration.ts'
import type { DurationOutcome, OneShotRcController } from './types.ts'

interface Checked {
  readonly candidate: Candidate
  readonly duration: DurationOutcome
}

export function rcAdvice(installed: OneShotRcController, need: RunNeed): PartsAdvice {
  const best = new Map<string, Checked>()
  let longest: Checked | null = null
  // A guaranteed minimum never passes the nominal run, nor does a guaranteed maximum stay under it: what lies outside cannot do.
  for (const candidate of rcCandidates(installed, { fromMin: 0, toMin: need.limitMin })) {
    const nominalMin = (candidate.timer.resistanceOhm * candidate.timer.capacitanceF * Math.log(3)) / 60
    if (nominalMin < need.minMin && longest !== null && nominalMin <= longest.duration.guaranteed.minMin) continue
    const checked = { candidate, duration: runDuration(candidate.timer, []) }
    if (!meets(checked.duration, need)) {
      if (checked.duration.timesOut === 'always' && checked.duration.guaranteed.minMin > (longest?.duration.guaranteed.minMin ?? 0))
        longest = checked
      continue
    }
    const kind = kindOf(candidate)
    const other = best.get(kind)
    if (!other || compare(checked, other) < 0) best.set(kind, checked)
  }
  if (best.size === 0) return none(whyNone(need, longest))
  const ranked = [...best.values()].sort(compare).slice(0, MOST_SUGGESTIONS)
  return { status: 'found', suggestions: ranked.map(toSuggestion) }
}

/** One suggestion a way of doing it: which parts are changed, which series, how many pieces. */
const kindOf = ({ changes, capacitor }: Candidate): string => `${changes.join()} ${capacitor?.series ?? ''} ${capacitor?.pieces ?? 0}`

/** Fewer parts to change, then fewer pieces, then values that every shop has, then the least over what is needed. */
function compare(one: Checked, other: Checked): number {
  const key = ({ candidate, duration }: Checked) => [
    candidate.changes.length,
    candidate.capacitor?.pieces ?? 0,
    isE12(candidate.timer.resistanceOhm) ? 0 : 1,
    duration.guaranteed.maxMin ?? Infinity,
  ]
  const [mine, theirs] = [key(one), key(other)]
  const at = mine.findIndex((value, index) => value !== theirs[index])
  return at < 0 ? 0 : (mine[at] ?? 0) - (theirs[at] ?? 0)
}

function toSuggestion({ candidate, duration }: Checked): Suggestion {
  const { timer, changes } = candidate
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

function whyNone({ minMin, limitMin }: RunNeed, longest: Checked | null): string {
  const needed = `${Math.ceil(minMin)} min`
  const instead = `Fit a timer of fixed length for ${needed} instead.`
  if (!longest) return `No stocked resistor and capacitor surely stop within ${Math.floor(limitMin)} min. ${instead}`
  const { duration, candidate } = longest
  const parts = `${formatOhm(candidate.timer.resistanceOhm)} and ${capacitorWords(candidate)}`
  return duration.guaranteed.minMin < minMin
    ? `No stocked resistor and capacitor surely run ${needed} and surely stop. The longest that do: ${parts}, ${spanWords(duration)}. Longer ones leak too much or need a resistor above the makers’ rule. ${instead}`
    : `The spread of stocked parts is too wide: what surely runs ${needed} may run longer than ${Math.floor(limitMin)} min (${parts}, ${spanWords(duration)}). ${instead}`
}

const percent = (fraction: number): string => `${Number((fraction * 100).toPrecision(3))} %`
const listed = (items: readonly string[]): string =>
  items.length < 2 ? items.join('') : `${items.slice(0, -1).join(', ')} and ${items.at(-1) ?? ''}`
