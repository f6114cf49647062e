/** Findings about stored water: the growth range and scalding, each with the guidance it is held against. */
import { assessHygiene } from '#lib/core/hygiene/assess-hygiene.ts'
import { GROWTH_RANGE_C, HYGIENE_POLICIES } from '#lib/core/hygiene/policies.ts'
import { assessScald } from '#lib/core/hygiene/scald.ts'
import { MIN_PER_DAY } from '#lib/core/units.ts'
import { bothC } from './assumptions.ts'
import { type Finding, found } from './evidence.ts'
import type { DayResult, Site, UnitHardware } from './types.ts'

/** Cooler guidance is met by nearly every tank; a week spent mostly in the range is worth a look (the product's own rule). */
const GROWTH_FRACTION = 0.5
const DAYS_A_WEEK = 7

interface HygieneCase {
  readonly site: Site
  readonly hardware: UnitHardware
  readonly days: readonly DayResult[]
}

export function hygieneFindings(unit: HygieneCase): readonly Finding[] {
  return [growth(unit), scald(unit)].filter((finding) => finding !== null)
}

/** Judged over the coming week, which is taken to repeat itself. */
function growth({ site, hardware, days }: HygieneCase): Finding | null {
  const { setPointC } = hardware.installation.load.tank
  const week = days.slice(0, DAYS_A_WEEK).flatMap((day) => (day.readiness ? [day.readiness.trace] : []))
  const sampleMin = week[0]?.sampleMin
  if (sampleMin === undefined || days.every((day) => day.status === 'no-need' || day.status === 'unknown')) return null
  const finding = assessHygiene({
    days: week.map(({ coldestC, outletC }) => ({ coldestC, hottestC: outletC })),
    sampleMin,
    setPointC,
    policy: site.hygienePolicy,
  })
  if (finding.status === 'not-known' || finding.keepsGuidance || finding.growthRangeFraction < GROWTH_FRACTION) return null
  const policy = HYGIENE_POLICIES[site.hygienePolicy]
  const hours = Math.round(finding.growthRangeHours)
  const ofHours = Math.round((week.length * MIN_PER_DAY) / 60)
  return {
    kind: 'growth-range',
    severity: 'attention',
    summary: `Stored water is between ${GROWTH_RANGE_C.from} and ${GROWTH_RANGE_C.to} °C for ${hours} of ${ofHours} h ahead`,
    evidence: {
      shortfallMin: null,
      day: null,
      // Dismissed under one guidance, it is a new finding under another.
      marks: [site.hygienePolicy],
      lines: [
        { kind: 'assumed', label: 'Guidance followed', value: `${policy.name} (${policy.whose})`, from: policy.source },
        { kind: 'assumed', label: 'Set point', value: bothC(setPointC), from: 'entered' },
        found('Coldest water in the growth range', `${hours} h of ${ofHours}`),
        found('Some of the water in it', `${Math.round(finding.someWaterHours)} h of ${ofHours}`),
        found(
          'At 60 °C for an hour',
          finding.sincePasteurisedH === null ? 'not in the week ahead' : `last ${Math.round(finding.sincePasteurisedH)} h before its end`,
        ),
        found('In words', finding.reason),
        ...finding.sources.map((source) => ({ kind: 'limit' as const, label: 'Source', value: source, from: source })),
        {
          kind: 'caution',
          label: 'Legionella',
          value: `Stored water between about 20 and 45 °C can grow Legionella. Ask ${policy.whomToAsk}. Nothing here certifies.`,
          from: finding.sources[0] ?? policy.source,
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
    summary: `${Math.round(finding.atTapC)} °C reaches the tap${mixingValveC === null ? ' without a mixing valve' : ' through its mixing valve'}`,
    evidence: {
      shortfallMin: null,
      day: null,
      lines: [
        { kind: 'assumed', label: 'Set point', value: bothC(setPointC), from: 'entered' },
        { kind: 'assumed', label: 'Mixing valve', value: mixingValveC === null ? 'none on record' : bothC(mixingValveC), from: 'entered' },
        ...(seconds === null
          ? []
          : [{ kind: 'limit' as const, label: 'Time to a serious burn', value: `${seconds} s`, from: finding.source }]),
        {
          kind: 'fix',
          label: mixingValveC === null ? 'Fit a mixing valve' : 'Set the mixing valve lower',
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
