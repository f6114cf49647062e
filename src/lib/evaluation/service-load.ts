/** The building's coincident load: base load and every run at full power, held against what the service may carry. */
import { PROFILES } from '#lib/core/hardware/check-hardware.ts'
import type { ProfileId } from '#lib/core/hardware/types.ts'
import type { MsInterval } from '#lib/core/time/types.ts'

export interface Service {
  readonly supplyVoltageV: number
  readonly phases: 1 | 3
  readonly serviceRatingA: number
  readonly baseLoadW: number
  readonly ruleProfile: ProfileId
}

export interface LoadRun extends MsInterval {
  /** End at its longest; `null` = may never end. */
  readonly longestEndsAtMs: number | null
  readonly powerW: number
}

/**
 * Share of the service rating that runs of hours may take: the rule profile's factor for continuous loads must fit into it. The
 * clause is the profile's; whether it binds a service is for the adopted code to say.
 */
export const continuousFraction = (profile: ProfileId): number => 1 / PROFILES[profile].continuous.factor

export const serviceRatingW = ({ supplyVoltageV, phases, serviceRatingA }: Service): number =>
  supplyVoltageV * serviceRatingA * (phases === 3 ? Math.sqrt(3) : 1)

export const serviceLimitW = (service: Service): number => serviceRatingW(service) * continuousFraction(service.ruleProfile)

/** A run that may never end is counted for this long; longer would flag the same hours again and again. */
const NEVER_ENDING_MS = 24 * 3_600_000

export interface LoadStep extends MsInterval {
  readonly loadW: number
  readonly runs: number
}

/** Steps of constant load over `[range)`, base load included; `longest` counts every run to its longest end. */
export function loadSteps(
  runs: readonly LoadRun[],
  { range, baseLoadW, ends }: { readonly range: MsInterval; readonly baseLoadW: number; readonly ends: 'expected' | 'longest' },
): readonly LoadStep[] {
  const events: { readonly atMs: number; readonly powerW: number; readonly count: number }[] = []
  for (const run of runs) {
    const endsAtMs = ends === 'expected' ? run.endsAtMs : (run.longestEndsAtMs ?? run.startsAtMs + NEVER_ENDING_MS)
    if (endsAtMs <= range.startsAtMs || run.startsAtMs >= range.endsAtMs) continue
    events.push({ atMs: Math.max(run.startsAtMs, range.startsAtMs), powerW: run.powerW, count: 1 })
    if (endsAtMs < range.endsAtMs) events.push({ atMs: endsAtMs, powerW: -run.powerW, count: -1 })
  }
  events.sort((one, other) => one.atMs - other.atMs)
  const steps: LoadStep[] = []
  let atMs = range.startsAtMs
  let powerW = 0
  let count = 0
  const close = (untilMs: number) => {
    if (untilMs > atMs) steps.push({ startsAtMs: atMs, endsAtMs: untilMs, loadW: baseLoadW + powerW, runs: count })
    atMs = untilMs
  }
  for (const event of events) {
    close(event.atMs)
    powerW += event.powerW
    count += event.count
  }
  close(range.endsAtMs)
  return steps
}

/** The highest step; the first of equals. `null` for an empty range. */
export const highestStep = (steps: readonly LoadStep[]): LoadStep | null =>
  steps.reduce<LoadStep | null>((best, step) => (best === null || step.loadW > best.loadW + 1e-6 ? step : best), null)

/** Stretches above a limit, neighbouring steps joined, each with its highest load. */
export function overLimit(
  steps: readonly LoadStep[],
  limitW: number,
): readonly (MsInterval & { readonly loadW: number; readonly runs: number })[] {
  const over: { startsAtMs: number; endsAtMs: number; loadW: number; runs: number }[] = []
  for (const step of steps) {
    if (step.loadW <= limitW + 1e-6) continue
    const last = over.at(-1)
    if (last && last.endsAtMs === step.startsAtMs) {
      last.endsAtMs = step.endsAtMs
      if (step.loadW > last.loadW) Object.assign(last, { loadW: step.loadW, runs: step.runs })
    } else over.push({ startsAtMs: step.startsAtMs, endsAtMs: step.endsAtMs, loadW: step.loadW, runs: step.runs })
  }
  return over
}
