/** Findings about what is installed: a timer that may never stop, hardware that fails its screening, a switch whose clock is off. */
import type { EvidenceLine } from '#db/queries/flag.ts'
import { describeController } from '#lib/core/controller/describe.ts'
import type { DurationOutcome } from '#lib/core/controller/types.ts'
import { checkHardware } from '#lib/core/hardware/check-hardware.ts'
import type { Check } from '#lib/core/hardware/types.ts'
import { clockSaid, minutes } from './assumptions.ts'
import { type Finding, found } from './evidence.ts'
import { sureParts } from './sure-parts.ts'
import { clockOffsetMin } from './unit-day.ts'
import type { DayResult, Site, UnitHardware } from './types.ts'

/** Below this a drift is not worth a visit (common practice, no source). */
const CLOCK_IS_OFF_FROM_MIN = 10

const MAINS: EvidenceLine = {
  kind: 'caution',
  label: 'Mains',
  value: 'Isolate and lock off before opening. Licensed practice only; the adopted local code decides. This screens, it does not certify.',
  from: 'common practice, no source',
}

interface HardwareCase {
  readonly site: Site
  readonly hardware: UnitHardware
  readonly duration: DurationOutcome
  readonly days: readonly DayResult[]
}

export function hardwareFindings(unit: HardwareCase): readonly Finding[] {
  return [neverStops(unit), failsScreening(unit), clockIsOff(unit)].filter((finding) => finding !== null)
}

/** `typically` is a hazard too: it stops with an ordinary part and not at the published limits. */
function neverStops({ hardware, duration, days }: HardwareCase): Finding | null {
  if (duration.timesOut === 'always') return null
  const never = duration.timesOut === 'never'
  return {
    kind: 'may-never-stop',
    severity: 'dangerous',
    summary: never ? 'Timer will not stop by itself' : 'Timer may never stop',
    evidence: {
      shortfallMin: null,
      day: null,
      lines: [
        { kind: 'assumed', label: 'Controller', value: describeController(hardware.installation.controller), from: 'entered' },
        ...duration.reasons.map((reason) => found('Timing', reason)),
        found('Times out', never ? 'never, even with ordinary parts' : 'with ordinary parts; not at their published limits'),
        ...(duration.typical.maxMin === null ? [] : [found('Run with ordinary parts', `up to ${minutes(duration.typical.maxMin)}`)]),
        {
          kind: 'fix',
          label: 'Take it out of use until it is mended',
          value: 'an electrician isolates the heater or fits a timer that always stops',
          from: 'common practice, no source',
        },
        ...sureParts(hardware, duration, days),
        {
          kind: 'caution',
          label: 'What it can do',
          value: 'The tank then relies on its thermostat alone, for days. Test that and the high-limit before use.',
          from: 'common practice, no source',
        },
        MAINS,
      ],
    },
  }
}

function failsScreening({ site, hardware }: HardwareCase): Finding | null {
  const fails = checkHardware(hardware.installation, site.ruleProfile).filter((check) => check.verdict === 'fail')
  const first = fails[0]
  if (!first) return null
  const more = fails.length > 1 ? `, and ${fails.length - 1} more` : ''
  return {
    kind: 'hardware-fails',
    severity: 'dangerous',
    summary: `${first.title}: ${first.figure}, ${first.limit}${more}`,
    evidence: { shortfallMin: null, day: null, marks: fails.map((one) => one.id), lines: [...fails.flatMap(checkLines), MAINS] },
  }
}

const checkLines = (check: Check): readonly EvidenceLine[] => [
  { kind: 'found', label: check.title, value: check.figure, from: 'entered' },
  {
    kind: 'limit',
    label: 'Limit',
    value: check.limit,
    from: check.confirmAgainstCode ? `${check.clause}; confirm against your code` : check.clause,
  },
  { kind: 'fix', label: 'What to do', value: check.reason, from: check.clause },
]

function clockIsOff({ site, hardware, days }: HardwareCase): Finding | null {
  const { controller } = hardware.installation
  const context = days[0]?.context
  if (controller.kind !== 'time-switch' || !context) return null
  const offsetOn = (on: typeof context) => (controller.followsClockChange ? 0 : clockOffsetMin(hardware, { site, context: on }))
  const offsetMin = offsetOn(context)
  const aheadMin = controller.driftMin + offsetMin
  // A clock that a change within these days puts right was set ahead for it, or needs nobody any more.
  const laterMin = controller.driftMin + offsetOn(days.at(-1)?.context ?? context)
  if (Math.min(Math.abs(aheadMin), Math.abs(laterMin)) < CLOCK_IS_OFF_FROM_MIN) return null
  return {
    kind: 'clock-is-off',
    severity: 'attention',
    summary: `Its clock is ${clockSaid(aheadMin)}: it runs ${Math.round(Math.abs(aheadMin))} min ${aheadMin > 0 ? 'early' : 'late'}`,
    evidence: {
      shortfallMin: null,
      day: context.day,
      lines: [
        { kind: 'assumed', label: 'Drift on record', value: clockSaid(controller.driftMin), from: 'entered' },
        {
          kind: 'assumed',
          label: 'Follows the clock change',
          value: controller.followsClockChange
            ? 'yes'
            : `no; since it was recorded the clocks moved by ${Math.abs(Math.round(offsetMin))} min`,
          from: 'entered',
        },
        found('Its clock', clockSaid(aheadMin)),
        { kind: 'fix', label: 'Set its clock right', value: 'at the next visit; note it as a new revision', from: 'computed' },
        MAINS,
      ],
    },
  }
}
