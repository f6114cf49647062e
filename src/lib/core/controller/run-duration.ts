/** How long a run really lasts: measured where somebody measured, computed from parts, or as set. */
import { rcOutcome } from './rc-outcome.ts'
import type { Controller, DialController, DurationOutcome, MeasuredDuration, OneShotFixedController } from './types.ts'

/**
 * Few readings say little about spread: from their mean on, the run is taken to differ by at least this over how many there are,
 * so that two that happen to agree do not pass for certain (common practice, no source).
 */
export const READING_SPREAD_FRACTION = 0.03

/** Clocked controllers have no duration of their own: their nominal is `null` and `runSource` gives their hours. */
export function runDuration(controller: Controller, measured: readonly MeasuredDuration[]): DurationOutcome {
  const computed = computedDuration(controller)
  return measured.length > 0 ? measuredDuration(measured, computed) : computed
}

function measuredDuration(measured: readonly MeasuredDuration[], computed: DurationOutcome): DurationOutcome {
  const minutes = measured.map((reading) => reading.durationMin)
  const mean = minutes.reduce((sum, value) => sum + value, 0) / minutes.length
  const leastMin = (mean * READING_SPREAD_FRACTION) / minutes.length
  const range = { minMin: Math.min(...minutes, mean - leastMin), maxMin: Math.max(...minutes, mean + leastMin) }
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
      return setDuration(controller, controller.settingMin)
    case 'dial':
      // A dial cannot be turned past the end of its scale, whatever was written down.
      return setDuration(controller, Math.min(controller.settingMin, controller.scaleMaxMin))
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

function setDuration(
  { toleranceFraction, settingMin: writtenMin }: DialController | OneShotFixedController,
  settingMin: number,
): DurationOutcome {
  const range = { minMin: settingMin * (1 - toleranceFraction), maxMin: settingMin * (1 + toleranceFraction) }
  return {
    source: 'setting',
    nominalMin: settingMin,
    typical: range,
    guaranteed: range,
    timesOut: 'always',
    reasons: [
      `Set to ${settingMin} min, tolerance ${(toleranceFraction * 100).toFixed(0)} %.`,
      ...(writtenMin > settingMin ? [`On record are ${writtenMin} min, past the end of its scale.`] : []),
    ],
  }
}
