/**
 * Loads that are not water heaters but are timed all the same: an amount of energy needed by a time (a charger, a pump), or a fixed
 * programme that must not be broken off (a dryer). The same questions: ready, required run, start-by, shortfall.
 */
import type { RunSource } from '../controller/types.ts'
import type { MinuteInterval } from '../time/types.ts'
import { MIN_PER_DAY, MIN_PER_HOUR } from '../units.ts'

export type TimedLoad =
  | {
      readonly kind: 'energy'
      /** What must arrive, and what share of what is drawn does. */
      readonly energyKwh: number
      readonly efficiencyFraction: number
      readonly powerW: number
    }
  | { readonly kind: 'programme'; readonly phases: readonly { readonly durationMin: number; readonly powerW: number }[] }

export interface TimedNeed {
  readonly load: TimedLoad
  readonly runs: RunSource
  /** Elapsed minutes from local midnight. */
  readonly readyByMin: number
}

export interface TimedOutcome {
  readonly status: 'ready' | 'short' | 'impossible'
  readonly reason: string
  /** `null` with status `impossible`. */
  readonly requiredRunMin: number | null
  readonly chosenRunMin: number
  readonly shortfallMin: number
  /** Latest start that is done in time (when short: that gets most done); `null` when the clock is never on. */
  readonly startByMin: number | null
  /** Drawn by then, with the run that can be counted on. */
  readonly energyInKwh: number
  readonly energyMissingKwh: number
}

export function assessTimedLoad({ load, runs, readyByMin }: TimedNeed): TimedOutcome {
  const exactMin = durationOf(load)
  if (exactMin === null) {
    const missing = { chosenRunMin: 0, shortfallMin: 0, startByMin: null, energyInKwh: 0, energyMissingKwh: wantedKwh(load) }
    return { ...missing, status: 'impossible', reason: 'The load draws no power.', requiredRunMin: null }
  }
  const chosen =
    runs.kind === 'pressed' ? pressedRun(runs.guaranteedMin, exactMin, readyByMin) : clockedRun({ load, runs, readyByMin, exactMin })
  const requiredRunMin = Math.ceil(exactMin)
  const ready = chosen.usableMin >= exactMin - 1e-9
  const shortfallMin = ready ? 0 : Math.max(1, Math.ceil(exactMin - chosen.usableMin))
  // A programme broken off has to begin again: what it drew counts as drawn, not as done.
  const energyInKwh = drawnKwh(load, Math.min(chosen.usableMin, exactMin))
  return {
    status: ready ? 'ready' : 'short',
    reason: ready ? '' : `Needs ${requiredRunMin} min; ${Math.floor(chosen.usableMin)} min can be counted on: ${shortfallMin} min short.`,
    requiredRunMin,
    chosenRunMin: chosen.usableMin,
    shortfallMin,
    startByMin: chosen.startByMin,
    energyInKwh,
    energyMissingKwh: ready ? 0 : wantedKwh(load) - (load.kind === 'energy' ? energyInKwh : 0),
  }
}

/** `null` when no run is long enough. */
function durationOf(load: TimedLoad): number | null {
  if (load.kind === 'programme') return load.phases.reduce((sum, phase) => sum + phase.durationMin, 0)
  if (load.energyKwh <= 0) return 0
  if (load.powerW <= 0 || load.efficiencyFraction <= 0) return null
  return (wantedKwh(load) * 1_000 * MIN_PER_HOUR) / load.powerW
}

/** Drawn from the supply for the whole of it. */
const wantedKwh = (load: TimedLoad): number =>
  load.kind === 'energy'
    ? load.efficiencyFraction > 0
      ? load.energyKwh / load.efficiencyFraction
      : load.energyKwh
    : drawnKwh(
        load,
        load.phases.reduce((sum, phase) => sum + phase.durationMin, 0),
      )

function drawnKwh(load: TimedLoad, minutes: number): number {
  if (load.kind === 'energy') return (load.powerW * minutes) / (1_000 * MIN_PER_HOUR)
  let leftMin = minutes
  let energyKwh = 0
  for (const { durationMin, powerW } of load.phases) {
    const partMin = Math.min(leftMin, durationMin)
    energyKwh += (powerW * partMin) / (1_000 * MIN_PER_HOUR)
    leftMin -= partMin
  }
  return energyKwh
}

interface Usable {
  readonly usableMin: number
  readonly startByMin: number | null
}

const pressedRun = (guaranteedMin: number, exactMin: number, readyByMin: number): Usable => ({
  usableMin: guaranteedMin,
  startByMin: Math.floor(readyByMin - Math.min(guaranteedMin, exactMin)),
})

/** Energy adds up over a day's on-times before the need; a programme needs one of them to itself. */
function clockedRun({
  load,
  runs,
  readyByMin,
  exactMin,
}: {
  readonly load: TimedLoad
  readonly runs: Extract<RunSource, { kind: 'clocked' }>
  readonly readyByMin: number
  readonly exactMin: number
}): Usable {
  const before = runs.onIntervals
    .map((on) => ({ startMin: Math.max(on.startMin, readyByMin - MIN_PER_DAY), endMin: Math.min(on.endMin, readyByMin) }))
    .filter((on) => on.endMin > on.startMin)
    .sort((one, other) => one.startMin - other.startMin)
  return load.kind === 'programme' ? longestOf(before, exactMin) : summed(before, exactMin)
}

/** The latest on-time that holds the whole programme, or the longest there is. */
function longestOf(before: readonly MinuteInterval[], exactMin: number): Usable {
  const lengthOf = (on: MinuteInterval): number => on.endMin - on.startMin
  const longest = before.reduce<MinuteInterval | null>((most, on) => (most && lengthOf(most) > lengthOf(on) ? most : on), null)
  const fits = before.filter((on) => lengthOf(on) >= exactMin - 1e-9).at(-1)
  const used = fits ?? longest
  if (!used) return { usableMin: 0, startByMin: null }
  return { usableMin: lengthOf(used), startByMin: fits ? Math.floor(used.endMin - exactMin) : used.startMin }
}

function summed(before: readonly MinuteInterval[], exactMin: number): Usable {
  let leftMin = exactMin
  let startByMin: number | null = null
  for (const on of [...before].reverse()) {
    if (leftMin <= 0) break
    const partMin = Math.min(leftMin, on.endMin - on.startMin)
    startByMin = Math.floor(on.endMin - partMin)
    leftMin -= partMin
  }
  return { usableMin: before.reduce((sum, on) => sum + on.endMin - on.startMin, 0), startByMin }
}
