/** What a one-shot could be built of from stock: capacitors and banks of them, resistors, and the chip; in the order of how much has to be changed. */
import { CAPACITOR_SERIES, type CapacitorSeriesId } from './capacitors.ts'
import { publishedMaxOhm } from './max-resistance.ts'
import { E24, E6, valuesBetween } from './preferred-values.ts'
import type { OneShotRcController } from './types.ts'

/** Resistors as stocked, metal film and metal glaze: 1 % to 10 MΩ, 5 % above, nothing above 22 MΩ in one piece (common practice, no source). */
const STOCKED_RESISTORS = { fromOhm: 100e3, toOhm: 22e6, fineToOhm: 10e6, fineFraction: 0.01, coarseFraction: 0.05 } as const
/** More film capacitors side by side than this do not fit an enclosure (common practice, no source). */
const MOST_IN_BANK = 4

export interface Candidate {
  readonly timer: OneShotRcController
  readonly changes: readonly ('resistor' | 'capacitor' | 'chip')[]
  /** `null` = the one that is installed. */
  readonly capacitor: { readonly series: CapacitorSeriesId; readonly eachF: number; readonly pieces: number } | null
}

type Capacitor = Pick<OneShotRcController, 'capacitanceF' | 'capacitanceToleranceFraction' | 'leakage'>
type Choice = readonly [capacitor: Capacitor, from: Candidate['capacitor']]

const CAPACITORS: readonly Choice[] = (Object.keys(CAPACITOR_SERIES) as CapacitorSeriesId[]).flatMap((series) => {
  const { stock, limit } = CAPACITOR_SERIES[series]
  // A bank of electrolytics leaks as much more as it holds more: only film gains by it.
  const most = limit.kind === 'self-time-constant' ? MOST_IN_BANK : 1
  return valuesBetween(E6, { from: stock.fromF, to: stock.toF }).flatMap((eachF) =>
    Array.from({ length: most }, (_, index): Choice => {
      const pieces = index + 1
      const capacitanceF = Number((eachF * pieces).toPrecision(6))
      const leakage = { kind: 'series', series, ratedV: stock.ratedV } as const
      return [
        { capacitanceF, capacitanceToleranceFraction: stock.toleranceFraction, leakage },
        { series, eachF, pieces },
      ]
    }),
  )
})

/** Every way to rebuild the timer whose nominal run is within the bounds and whose resistor its chip may be given. */
export function* rcCandidates(
  installed: OneShotRcController,
  { fromMin, toMin }: { readonly fromMin: number; readonly toMin: number },
): Generator<Candidate> {
  const chips = installed.icFamily === 'bipolar' ? (['bipolar', 'cmos'] as const) : (['cmos'] as const)
  const kept: Choice = [installed, null]
  for (const icFamily of chips) {
    const chip = icFamily === installed.icFamily ? [] : (['chip'] as const)
    const highestOhm = Math.min(STOCKED_RESISTORS.toOhm, publishedMaxOhm({ supplyV: installed.supplyV, icFamily }))
    for (const [capacitor, from] of [kept, ...CAPACITORS]) {
      const withCapacitor = { ...installed, icFamily, ...pick(capacitor) }
      const changed = from ? (['capacitor'] as const) : []
      const ohmPerMin = 60 / (capacitor.capacitanceF * Math.log(3))
      const bounds = { from: Math.max(STOCKED_RESISTORS.fromOhm, fromMin * ohmPerMin), to: Math.min(highestOhm, toMin * ohmPerMin) }
      if (installed.resistanceOhm >= bounds.from && installed.resistanceOhm <= bounds.to && (from || chip.length > 0))
        yield { timer: withCapacitor, changes: [...changed, ...chip], capacitor: from }
      if (bounds.from > bounds.to) continue
      for (const resistanceOhm of valuesBetween(E24, bounds)) {
        if (resistanceOhm === installed.resistanceOhm) continue
        const { fineToOhm, fineFraction, coarseFraction } = STOCKED_RESISTORS
        const resistanceToleranceFraction = resistanceOhm <= fineToOhm ? fineFraction : coarseFraction
        yield {
          timer: { ...withCapacitor, resistanceOhm, resistanceToleranceFraction },
          changes: ['resistor', ...changed, ...chip],
          capacitor: from,
        }
      }
    }
  }
}

const pick = ({ capacitanceF, capacitanceToleranceFraction, leakage }: Capacitor): Capacitor => ({
  capacitanceF,
  capacitanceToleranceFraction,
  leakage,
})
