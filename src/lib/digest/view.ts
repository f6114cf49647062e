/** A digest in words: every saving with its baseline and its range, and nothing claimed that an older edition did not account for. */
import type { DigestFigures, DigestVisit } from '#db/queries/digest.ts'
import { counted, formatDay } from '#lib/format.ts'
import { formatMoney } from '#lib/figures.ts'

export interface DigestView {
  readonly headline: string
  readonly readiness: string
  readonly lines: readonly (readonly [label: string, value: string])[]
  readonly saving: string
  readonly paragraphs: readonly string[]
}

/**
 * The model's own spread against published reference runs is about ±1 % of a day's energy, and standing loss in the field is up
 * to twice its rating; so the saving, which is lost heat alone, is given from none to twice the computed figure.
 */
const SAVING_RANGE = { low: 0, high: 2 } as const

export const monthName = (month: string): string => formatDay(`${month}-01`, 'MMMM yyyy')

export function digestView(figures: DigestFigures, month: string): DigestView {
  const { currency, unitDaysNeeded, unitDaysWarm, energyKwh, costMinor } = figures
  const warmPercent = unitDaysNeeded === 0 ? null : Math.floor((unitDaysWarm / unitDaysNeeded) * 1000) / 10
  return {
    headline: costMinor === null ? `${energyKwh.toFixed(1)} kWh for hot water` : `${formatMoney(costMinor, currency)} for hot water`,
    readiness:
      warmPercent === null
        ? 'No unit needed hot water this month.'
        : `Warm on time on ${warmPercent} % of ${unitDaysNeeded} unit-days, as computed.`,
    saving: savingWords(figures),
    lines: linesOf(figures),
    paragraphs: [
      figures.worstUnits.length === 0
        ? 'No unit ran cold.'
        : `Coldest: ${figures.worstUnits.map((unit) => `${unit.code} (${counted(unit.coldDays, 'day')}, up to ${unit.worstShortfallMin} min short)`).join('; ')}.`,
      ...visitWords('Fixed', figures.signedOff),
      ...visitWords('Planned', figures.planned),
      ...(figures.daysCovered < figures.daysInMonth
        ? [`${figures.daysCovered} of ${figures.daysInMonth} days of ${monthName(month)} are covered; the others were not evaluated.`]
        : []),
      ...unpricedWords(figures),
      'Figures are computed from what is installed and when people shower, not metered. Demand and fixed charges are not in them.',
    ],
  }
}

function linesOf(figures: DigestFigures): DigestView['lines'] {
  const { currency, energyKwh, peakKwh, costMinor, baselineEnergyKwh, baselineCostMinor, flagsOpenAtStart } = figures
  const open = figures.flagsOpen.filter((flag) => flag.count > 0).map((flag) => `${flag.count} ${flag.severity}`)
  return [
    ['Energy', `${energyKwh.toFixed(1)} kWh`],
    ['of it on-peak', energyKwh > 0 ? `${peakKwh.toFixed(1)} kWh (${((peakKwh / energyKwh) * 100).toFixed(1)} %)` : '0 kWh'],
    ['Energy cost', costMinor === null ? 'no tariff in force' : formatMoney(costMinor, currency)],
    [
      'Always on, same showers',
      `${baselineEnergyKwh.toFixed(1)} kWh${baselineCostMinor === null ? '' : `, ${formatMoney(baselineCostMinor, currency)}`}`,
    ],
    ...(flagsOpenAtStart === undefined ? [] : [['Flags open at the start', String(flagsOpenAtStart)] as const]),
    ['Flags raised / closed', `${figures.flagsRaised} / ${figures.flagsClosed}`],
    ['Flags open at the end', open.join(', ') || 'none'],
    ['Visits signed off / planned', `${figures.visitsDone} / ${figures.visitsPlanned}`],
    ['Tenants said hot / cold', `${figures.feedbackHot} / ${figures.feedbackCold}`],
  ]
}

function unpricedWords({ costMinor, pricedUnitDays, computedUnitDays }: DigestFigures): readonly string[] {
  if (costMinor === null || pricedUnitDays === undefined || computedUnitDays === undefined || pricedUnitDays === computedUnitDays) return []
  const missing = computedUnitDays - pricedUnitDays
  return [
    `No price was in force for ${missing} of ${counted(computedUnitDays, 'unit-day')}: their energy is in the figures, their cost is not.`,
  ]
}

/** Unit codes and days: what an owner may know of a visit. */
function visitWords(label: string, visits: readonly DigestVisit[] | undefined): readonly string[] {
  if (!visits || visits.length === 0) return []
  return [`${label}: ${visits.map(({ code, day }) => (day === null ? code : `${code} (${formatDay(day, 'd MMMM')})`)).join(', ')}.`]
}

function savingWords(figures: DigestFigures): string {
  const { savedKwh, unitDaysWarm } = figures
  if (savedKwh === undefined) return 'This edition states no saving.'
  if (unitDaysWarm === 0) return 'No unit-day was warm on time, so there is nothing to compare with heaters always on.'
  const base = `On the ${unitDaysWarm} unit-days that were warm on time, against the same heaters always on with the same showers:`
  const said =
    savedKwh <= 0 ? `no energy saved (${(-savedKwh).toFixed(1)} kWh more)` : `${savedKwh.toFixed(1)} kWh less (${rangeOf(savedKwh)})`
  const why = savedKwh <= 0 ? '' : ' The range is by how much standing losses in the field differ from their ratings.'
  return `${base} ${said}${moneyWords(figures)}.${why} What a cold shower did not get is not counted.`
}

const rangeOf = (savedKwh: number): string =>
  `from ${(savedKwh * SAVING_RANGE.low).toFixed(0)} to ${(savedKwh * SAVING_RANGE.high).toFixed(0)} kWh`

/** Money saved is energy saved and hours moved; only the first is as uncertain as the losses, at the baseline's mean price. */
function moneyWords(figures: DigestFigures): string {
  const { savedMinor = null, baselineCostMinor, currency } = figures
  if (savedMinor === null) return ''
  const savedKwh = figures.pricedSavedKwh ?? figures.savedKwh ?? 0
  const baselineEnergyKwh = figures.pricedBaselineKwh ?? figures.baselineEnergyKwh
  const signed = (minor: number) => `${formatMoney(Math.round(Math.abs(minor)), currency)} ${minor < 0 ? 'more' : 'less'}`
  const priceMinorPerKwh = baselineCostMinor === null || baselineEnergyKwh <= 0 ? null : baselineCostMinor / baselineEnergyKwh
  if (priceMinorPerKwh === null || savedKwh <= 0) return `; at the tariff ${signed(savedMinor)}`
  const at = (factor: number) => signed(savedMinor + (factor - 1) * savedKwh * priceMinorPerKwh)
  return `; at the tariff ${signed(savedMinor)} (from ${at(SAVING_RANGE.low)} to ${at(SAVING_RANGE.high)})`
}
