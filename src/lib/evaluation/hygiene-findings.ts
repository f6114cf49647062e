/** Findings about stored water: the growth range and scalding, each with the guidance it is held against. */
import { assessHygiene, GROWTH_RANGE_C, HYGIENE_POLICIES } from '#lib/core/hygiene/assess-hygiene.ts'
import { assessScald } from '#lib/core/hygiene/scald.ts'
import { bothC } from './assumptions.ts'
import { type Finding, found } from './evidence.ts'
import type { DayResult, Site, UnitHardware } from './types.ts'

/** Cooler guidance is met by nearly every tank; a day spent mostly in the range is worth a look (the product's own rule). */
const GROWTH_FRACTION = 0.5

interface HygieneCase {
  readonly site: Site
  readonly hardware: UnitHardware
  readonly days: readonly DayResult[]
}

export function hygieneFindings(unit: HygieneCase): readonly Finding[] {
  return [growth(unit), scald(unit)].filter((finding) => finding !== null)
}

/** Judged on the day whose coldest water stays longest in the range. */
function growth({ site, hardware, days }: HygieneCase): Finding | null {
  const { setPointC } = hardware.installation.load.tank
  const judged = days.flatMap((day) => {
    if (!day.readiness || day.status === 'no-need') return []
    const { coldestC, sampleMin } = day.readiness.trace
    return [{ day, finding: assessHygiene({ coldestC, sampleMin, setPointC, policy: site.hygienePolicy }) }]
  })
  const worst = judged
    .filter(({ finding }) => finding.sincePasteurisedH === null && finding.growthRangeFraction >= GROWTH_FRACTION)
    .sort((one, other) => other.finding.growthRangeHours - one.finding.growthRangeHours)[0]
  if (!worst) return null
  const policy = HYGIENE_POLICIES[site.hygienePolicy]
  const hours = Math.round(worst.finding.growthRangeHours)
  return {
    kind: 'growth-range',
    severity: 'attention',
    summary: `Stored water is between ${GROWTH_RANGE_C.from} and ${GROWTH_RANGE_C.to} °C for ${hours} h of the day`,
    evidence: {
      shortfallMin: null,
      day: worst.day.context.day,
      lines: [
        { kind: 'assumed', label: 'Guidance followed', value: policy.name, from: policy.source },
        { kind: 'assumed', label: 'Set point', value: bothC(setPointC), from: 'entered' },
        found('Coldest water in the growth range', `${hours} h of 24`),
        found('In words', worst.finding.reason),
        ...worst.finding.sources.map((source) => ({ kind: 'limit' as const, label: 'Source', value: source, from: source })),
        {
          kind: 'caution',
          label: 'Legionella',
          value:
            'Stored water between about 20 and 45 °C can grow Legionella. Ask whoever assesses water risk for this building; nothing here certifies.',
          from: worst.finding.sources[0] ?? policy.source,
        },
      ],
    },
  }
}

function scald({ hardware }: HygieneCase): Finding | null {
  const { setPointC, mixingValveC } = hardware.installation.load.tank
  const finding = assessScald(setPointC, mixingValveC)
  if (!finding.atRisk) return null
  const seconds = finding.secondsToBurn
  return {
    kind: 'scald-risk',
    severity: 'attention',
    summary: `${Math.round(setPointC)} °C reaches the tap without a mixing valve`,
    evidence: {
      shortfallMin: null,
      day: null,
      lines: [
        { kind: 'assumed', label: 'Set point', value: bothC(setPointC), from: 'entered' },
        { kind: 'assumed', label: 'Mixing valve', value: 'none on record', from: 'entered' },
        ...(seconds === null
          ? []
          : [{ kind: 'limit' as const, label: 'Time to a serious burn', value: `${seconds} s`, from: finding.source }]),
        {
          kind: 'fix',
          label: 'Fit a mixing valve',
          value: 'so that storage stays hot and the tap does not',
          from: 'common practice, no source',
        },
        {
          kind: 'caution',
          label: 'Scalding',
          value: 'Children and old people burn sooner. Lowering the set point instead may let Legionella grow.',
          from: finding.source,
        },
      ],
    },
  }
}
