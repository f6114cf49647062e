/** The building as a whole: hours in which all runs at their longest would pass what the service may carry. Pure. */
import { PROFILES } from '#lib/core/hardware/check-hardware.ts'
import { clauseOf } from '#lib/core/hardware/verdict.ts'
import { dwellingDemandFactor, heaterDemandFactor } from '#lib/core/hardware/service-demand.ts'
import { civilOf } from '#lib/core/time/civil.ts'
import type { MsInterval, Zone } from '#lib/core/time/types.ts'
import { formatDay, formatMinuteOfDay } from '#lib/format.ts'
import type { EvidenceLine } from '#db/queries/flag.ts'
import type { Limit, RuleProfile } from '#lib/core/hardware/profiles/profile.ts'
import { type Finding, found } from './evidence.ts'
import { type LoadRun, loadSteps, overLimit, type Service, serviceLimitW, serviceRatingW } from './service-load.ts'

export interface ServiceCase {
  readonly service: Service
  readonly zone: Zone
  readonly runs: readonly LoadRun[]
  readonly range: MsInterval
}

export const kw = (powerW: number): string => `${(powerW / 1_000).toFixed(powerW < 100_000 ? 1 : 0)} kW`

const SHOWN = 5

export function overServiceFinding({ service, zone, runs, range }: ServiceCase): Finding | null {
  const limitW = serviceLimitW(service)
  const over = overLimit(loadSteps(runs, { range, baseLoadW: service.baseLoadW, ends: 'longest' }), limitW)
  const worst = over.reduce<(typeof over)[number] | null>((best, one) => (best === null || one.loadW > best.loadW ? one : best), null)
  if (!worst) return null
  const said = (instantMs: number) => {
    const { day, minuteOfDay } = civilOf(instantMs, zone)
    return { day, words: `${formatDay(day, 'EEE d MMM')} ${formatMinuteOfDay(Math.floor(minuteOfDay))}` }
  }
  const { continuous } = PROFILES[service.ruleProfile]
  const { factor } = continuous
  return {
    kind: 'over-service',
    severity: 'dangerous',
    summary: `${kw(worst.loadW)} against ${kw(limitW)} on ${said(worst.startsAtMs).words}`,
    evidence: {
      shortfallMin: null,
      day: said(worst.startsAtMs).day,
      lines: [
        {
          kind: 'assumed',
          label: 'Service',
          value: `${service.serviceRatingA} A, ${service.supplyVoltageV} V, ${service.phases === 3 ? 'three phases' : 'one phase'}: ${kw(serviceRatingW(service))}`,
          from: 'entered',
        },
        { kind: 'assumed', label: 'Everything else in the building', value: `${kw(service.baseLoadW)} throughout`, from: 'entered' },
        { kind: 'assumed', label: 'Runs', value: 'each at its start-by and at its longest, full power throughout', from: 'computed' },
        {
          kind: 'limit',
          label: 'May be carried for hours',
          value: factor === 1 ? kw(limitW) : `${kw(limitW)}: the rating over ${factor}`,
          from: continuous.confirm
            ? `${clauseOf(continuous)}; confirm against your code`
            : `${clauseOf(continuous)}, applied to the service`,
        },
        ...diversity(PROFILES[service.ruleProfile], worst.runs),
        found('Highest', `${kw(worst.loadW)} with ${worst.runs} runs at once, from ${said(worst.startsAtMs).words}`),
        ...over
          .slice(0, SHOWN)
          .map((one) =>
            found('Over the limit', `${said(one.startsAtMs).words} to ${said(one.endsAtMs).words.slice(-5)}: up to ${kw(one.loadW)}`),
          ),
        ...(over.length > SHOWN ? [found('And', `${over.length - SHOWN} more stretches`)] : []),
        {
          kind: 'fix',
          label: 'Spread the starts',
          value: 'move some of these runs earlier; each window in the calendar says how far',
          from: 'computed',
        },
        {
          kind: 'caution',
          label: 'Service',
          value:
            'Timers are not an approved energy-management system and synchronised timers void diversity. No approval for a smaller service follows from this.',
          from: 'common practice, no source',
        },
      ],
    },
  }
}

/** What a permit's calculation may have counted on: said because synchronised runs undo it, never taken off the load. */
function diversity(profile: RuleProfile, heaters: number): readonly EvidenceLine[] {
  const line = (label: string, factor: number, limit: Limit): EvidenceLine => ({
    kind: 'limit',
    label,
    value: `${Math.round(factor * 100)} % for ${heaters}; nothing is taken off here, since runs at the same time undo it`,
    from: limit.confirm ? `${clauseOf(limit)}; confirm against your code` : clauseOf(limit),
  })
  const dwellings = dwellingDemandFactor(profile, heaters)
  return [
    line('A service calculation may count of heaters', heaterDemandFactor(profile, heaters), profile.heaterDemand),
    ...(profile.dwellingDemand && dwellings !== null ? [line('… and of whole dwellings', dwellings, profile.dwellingDemand)] : []),
  ]
}
