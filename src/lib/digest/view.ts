/** A digest in words: every saving with its baseline and its range. */
import type { DigestFigures } from '#db/queries/digest.ts'
import { counted, formatDay, formatMoney } from '#lib/format.ts'

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
  const { currency, unitDaysNeeded, unitDaysWarm, energyKwh, peakKwh, costMinor } = figures
  const warmPercent = unitDaysNeeded === 0 ? null : Math.floor((unitDaysWarm / unitDaysNeeded) * 1000) / 10
  const open = figures.flagsOpen.filter((flag) => flag.count > 0).map((flag) => `${flag.count} ${flag.severity}`)
  const cost = costMinor === null ? 'no tariff in force' : formatMoney(costMinor, currency)
  return {
    headline: costMinor === null ? `${energyKwh.toFixed(1)} kWh for hot water` : `${formatMoney(costMinor, currency)} for hot water`,
    readiness:
      warmPercent === null
        ? 'No unit needed hot water this month.'
        : `Warm on time on ${warmPercent} % of ${unitDaysNeeded} unit-days, as computed.`,
    saving: savingWords(figures),
    lines: [
      ['Energy', `${energyKwh.toFixed(1)} kWh`],
      ['of it on-peak', energyKwh > 0 ? `${peakKwh.toFixed(1)} kWh (${((peakKwh / energyKwh) * 100).toFixed(1)} %)` : '0 kWh'],
      ['Energy cost', cost],
      [
        'Always on, same showers',
        `${figures.baselineEnergyKwh.toFixed(1)} kWh${figures.baselineCostMinor === null ? '' : `, ${formatMoney(figures.baselineCostMinor, currency)}`}`,
      ],
      ['Flags raised / closed', `${figures.flagsRaised} / ${figures.flagsClosed}`],
      ['Flags open at the end', open.join(', ') || 'none'],
      ['Visits signed off / planned', `${figures.visitsDone} / ${figures.visitsPlanned}`],
      ['Tenants said hot / cold', `${figures.feedbackHot} / ${figures.feedbackCold}`],
    ],
    paragraphs: [
      figures.worstUnits.length === 0
        ? 'No unit ran cold.'
        : `Coldest: ${figures.worstUnits.map((unit) => `${unit.code} (${counted(unit.coldDays, 'day')}, up to ${unit.worstShortfallMin} min short)`).join('; ')}.`,
      ...(figures.daysCovered < figures.daysInMonth
        ? [`${figures.daysCovered} of ${figures.daysInMonth} days of ${monthName(month)} are covered; the others were not evaluated.`]
        : []),
      'Figures are computed from what is installed and when people shower, not metered. Demand and fixed charges are not in them.',
    ],
  }
}

function savingWords({ savedKwh, savedMinor, unitDaysWarm, currency }: DigestFigures): string {
  if (unitDaysWarm === 0) return 'No unit-day was warm on time, so there is nothing to compare with heaters always on.'
  const money = savedMinor === null ? '' : `, ${formatMoney(savedMinor, currency)} at the tariff`
  const base = `On the ${unitDaysWarm} unit-days that were warm on time, against the same heaters always on with the same showers:`
  if (savedKwh <= 0) return `${base} no energy saved (${(-savedKwh).toFixed(1)} kWh more)${money}.`
  const range = `from ${(savedKwh * SAVING_RANGE.low).toFixed(0)} to ${(savedKwh * SAVING_RANGE.high).toFixed(0)} kWh, as standing losses in the field differ from ratings`
  return `${base} ${savedKwh.toFixed(1)} kWh less (${range})${money}. What a cold shower did not get is not counted.`
}
