/** How long a run really lasts: measured where somebody measured, computed from parts, or as set. */
import { IC_TOLERANCE_FRACTION, rcCorners, rcDuration } from './one-shot-rc.ts'
import type { Controller, DurationOutcome, MeasuredDuration, OneShotRcController } from './types.ts'

/** One stop-watch reading says nothing about spread; 3 % stands in for it (common practice, no source). */
export const SINGLE_READING_SPREAD_FRACTION = 0.03

const S_PER_MIN = 60

/** Clocked controllers have no duration of their own: their nominal is `null` and `runSource` gives their hours. */
export function runDuration(controller: Controller, measured: readonly MeasuredDuration[]): DurationOutcome {
  const computed = computedDuration(controller)
  return measured.length > 0 ? measuredDuration(measured, computed) : computed
}

function measuredDuration(measured: readonly MeasuredDuration[], computed: DurationOutcome): DurationOutcome {
  const minutes = measured.map((reading) => reading.durationMin)
  const mean = minutes.reduce((sum, value) => sum + value, 0) / minutes.length
  const spread = minutes.length === 1 ? mean * SINGLE_READING_SPREAD_FRACTION : 0
  const range = { minMin: Math.min(...minutes) - spread, maxMin: Math.max(...minutes) + spread }
  return {
    source: 'measured',
    nominalMin: computed.nominalMin,
    typical: range,
    guaranteed: range,
    // It did end when it was measured; a computed stall is still a hazard.
    timesOut: computed.timesOut === 'never' ? 'typically' : computed.timesOut,
    reasons: [
      `Measured by stop-watch ${minutes.length === 1 ? 'once' : `${minutes.length} times`}: ${mean.toFixed(1)} min on average.`,
      ...(computed.timesOut === 'always' ? [] : computed.reasons),
    ],
  }
}

function computedDuration(controller: Controller): DurationOutcome {
  switch (controller.kind) {
    case 'one-shot-rc':
      return rcOutcome(controller)
    case 'one-shot-fixed':
    case 'dial': {
      const { settingMin, toleranceFraction } = controller
      const range = { minMin: settingMin * (1 - toleranceFraction), maxMin: settingMin * (1 + toleranceFraction) }
      const reasons = [`Set to ${settingMin} min, tolerance ${(toleranceFraction * 100).toFixed(0)} %.`]
      return { source: 'setting', nominalMin: settingMin, typical: range, guaranteed: range, timesOut: 'always', reasons }
    }
    case 'time-switch':
    case 'supplier-contactor': {
      const none = { minMin: 0, maxMin: null }
      return {
        source: 'setting',
        nominalMin: null,
        typical: none,
        guaranteed: none,
        timesOut: 'always',
        reasons: ['Runs by the clock, not for a duration.'],
      }
    }
  }
}

function rcOutcome(timer: OneShotRcController): DurationOutcome {
  const corners = rcCorners(timer)
  const typical = rcDuration(corners.typical)
  const longest = rcDuration(corners.longest)
  const shortest = rcDuration(corners.shortest)
  const nominalMin = (timer.resistanceOhm * timer.capacitanceF * Math.log(3)) / S_PER_MIN
  // Tolerances combine by root sum of squares; leakage and bias are not folded in, they are in the centre value.
  const rss = Math.hypot(timer.resistanceToleranceFraction, timer.capacitanceToleranceFraction, IC_TOLERANCE_FRACTION)
  const minutes = (outcome: typeof typical): number | null => (outcome.status === 'ends' ? outcome.durationS / S_PER_MIN : null)
  const typicalMin = minutes(typical)
  const longestMin = minutes(longest)
  const shortestMin = minutes(shortest) ?? nominalMin
  const timesOut = typicalMin === null ? 'never' : longestMin === null ? 'typically' : 'always'
  return {
    source: 'computed',
    nominalMin,
    typical: { minMin: (typicalMin ?? nominalMin) * (1 - rss), maxMin: typicalMin === null ? null : typicalMin * (1 + rss) },
    guaranteed: {
      minMin: shortestMin * (1 - IC_TOLERANCE_FRACTION),
      maxMin: longestMin === null ? null : longestMin * (1 + IC_TOLERANCE_FRACTION),
    },
    timesOut,
    reasons: [
      `R × C × ln 3 gives ${nominalMin.toFixed(1)} min.`,
      typicalMin === null
        ? 'With typical leakage and bias it never reaches its threshold.'
        : `With typical leakage and bias ${typicalMin.toFixed(1)} min.`,
      ...(longest.status === 'never'
        ? [
            `At the published limits of leakage and bias the capacitor settles at ${longest.settlesAtV.toFixed(2)} V, below the ${longest.thresholdV.toFixed(2)} V threshold: it may never time out.`,
          ]
        : []),
    ],
  }
}
