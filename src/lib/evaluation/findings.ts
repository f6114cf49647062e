/** What somebody must act on in a unit: findings from its days and its hardware, each with its numbers in the order they are read. Pure. */
import type { AnsweredDay } from '#db/queries/feedback.ts'
import type { EvidenceLine } from '#db/queries/flag.ts'
import type { DurationOutcome } from '#lib/core/controller/types.ts'
import type { NeedOutcome } from '#lib/core/tank/types.ts'
import { formatDay } from '#lib/format.ts'
import { clockWords } from '#lib/strip/clock.ts'
import { minutes } from './assumptions.ts'
import { disagreementFinding } from './disagreement.ts'
import { assumedLines, type Finding, found } from './evidence.ts'
import { fixesFor } from './fixes.ts'
import { hardwareFindings } from './hazards.ts'
import { hygieneFindings } from './hygiene-findings.ts'
import type { DayContext, DayResult, Site, UnitHardware, Wants } from './types.ts'

export interface FindingCase {
  readonly site: Site
  readonly contexts: readonly DayContext[]
  readonly hardware: UnitHardware | null
  readonly duration: DurationOutcome | null
  /** What the tenancy of a day wants, in step with `days`. */
  readonly wants: readonly Wants[]
  readonly days: readonly DayResult[]
  readonly answers: readonly AnsweredDay[]
}

export function unitFindings(unit: FindingCase): readonly Finding[] {
  const { site, hardware, duration, days, answers } = unit
  const cold = coldFinding(unit)
  const disagreement = hardware && disagreementFinding(hardware, answers)
  return [
    ...(cold ? [cold] : []),
    ...(disagreement ? [disagreement] : []),
    ...(hardware && duration ? hardwareFindings({ site, hardware, duration, days }) : []),
    ...(hardware ? hygieneFindings({ site, hardware, days }) : []),
  ]
}

/** One flag a unit, with the figures of its worst day. */
function coldFinding({ site, contexts, hardware, wants, days }: FindingCase): Finding | null {
  const cold = days.map((day) => ({ day, need: worstNeed(day) })).filter((one) => one.need !== null)
  const worst = cold.reduce<(typeof cold)[number] | null>(
    (best, one) => (best === null || weight(one.need) > weight(best.need) ? one : best),
    null,
  )
  if (!worst?.need || !hardware) return null
  const { day, need } = worst
  const at = (minute: number) => clockWords(minute, day.context.clockChange)
  const showers = `${need.need.count === 1 ? 'one shower' : `${need.need.count} showers`} at ${at(need.need.readyByMin)}`
  const shortfallMin = need.status === 'short' ? need.shortfallMin : null
  const fixes = fixesFor({ site, contexts, hardware, wants, days, worst: day })
  return {
    kind: 'misses-recovery',
    severity: 'cold',
    summary: shortfallMin === null ? `Cannot serve ${showers}: ${need.reason}` : `${shortfallMin} min short for ${showers}`,
    evidence: {
      shortfallMin,
      day: day.context.day,
      lines: [
        ...assumedLines(day.assumptions),
        {
          kind: 'assumed',
          label: 'Wanted',
          value: `${need.need.count} × ${need.need.minutesEach} min at ${need.need.flowLPerMin} L/min and ${need.need.useTemperatureC} °C, from ${at(need.need.readyByMin)}`,
          from: 'entered',
        },
        found(
          'Worst day',
          `${formatDay(day.context.day)}; ${cold.length === 1 ? 'the only short day' : `${cold.length} short days`} of ${days.length}`,
        ),
        found('Run needed', need.requiredRunMin === null ? 'more than 12 h' : minutes(need.requiredRunMin)),
        found('Run to count on', minutes(need.chosenRunMin)),
        ...(shortfallMin === null ? [] : [found('Shortfall', minutes(shortfallMin))]),
        found('Warm water served', `${Math.floor(need.minutesServed)} of ${need.minutesWanted} min`),
        found('In words', need.reason),
        ...fixes.map(({ label, value }): EvidenceLine => ({
          kind: 'fix',
          label,
          value,
          from: 'computed: the model was run again with it',
        })),
        {
          kind: 'caution',
          label: 'Hot water is owed',
          value: 'In many places a landlord must supply it. Never bypass a thermostat, high-limit or relief valve to gain time.',
          from: 'common practice, no source',
        },
      ],
    },
  }
}

const weight = (need: NeedOutcome | null): number => (need === null ? 0 : need.status === 'impossible' ? Infinity : need.shortfallMin)

function worstNeed(day: DayResult): NeedOutcome | null {
  const cold = (day.readiness?.needs ?? []).filter((need) => need.status !== 'ready')
  return cold.reduce<NeedOutcome | null>((worst, need) => (worst === null || weight(need) > weight(worst) ? need : worst), null)
}
