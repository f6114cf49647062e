/**
 * The storage water heater: its data, its draws and what the model answers. Node 0 is the top.
 * Effects: plug-flow draw, conduction, loss per node, inversion mixing, element heights, upper-first control, dead band.
 */
import type { RunSource } from '../controller/types.ts'
import type { MinuteInterval } from '../time/types.ts'

/** Where the standing loss is known from. */
export type LossRating =
  | { readonly kind: 'ua'; readonly lossWPerK: number }
  | { readonly kind: 'uef'; readonly uef: number; readonly drawPattern: 'very-small' | 'low' | 'medium' | 'high' }
  | { readonly kind: 'ef'; readonly ef: number }
  | { readonly kind: 'kwh-per-day'; readonly lossKwhPerDay: number; readonly testDeltaK: number }
  | { readonly kind: 'class'; readonly label: 'A+' | 'A' | 'B' | 'C' | 'D' | 'E' | 'F' }

export interface HeatingElement {
  readonly ratedPowerW: number
  readonly ratedVoltageV: number
}

export interface TankSpec {
  readonly nominalVolumeL: number
  /** `null`: 0.90 of nominal is used. */
  readonly actualVolumeL: number | null
  /** `null`: derived from the volume. */
  readonly heightM: number | null
  readonly loss: LossRating
  readonly upperElement: HeatingElement | null
  readonly lowerElement: HeatingElement | null
  /** Share of the volume above the upper element; default one third (sources differ, see the constant). */
  readonly shareAboveUpperFraction: number
  /** Share of the volume below the lower element, which no element heats; default one sixth (sources differ, see the constant). */
  readonly shareBelowLowerFraction?: number
  readonly setPointC: number
  readonly deadBandK: number
  readonly ambientC: number
  readonly mixingValveC: number | null
}

/** Cold water at the site by day of year. */
export type InletClimate =
  | { readonly kind: 'climate'; readonly meanAirC: number; readonly swingAirK: number; readonly hemisphere: 'north' | 'south' }
  | { readonly kind: 'months'; readonly inletC: readonly number[] }

/** One shower need of a local day: `count` showers one after another, the first at `readyByMin`. */
export interface ShowerNeed {
  /** Elapsed minutes from local midnight. */
  readonly readyByMin: number
  readonly count: number
  readonly minutesEach: number
  readonly gapMin: number
  readonly flowLPerMin: number
  readonly useTemperatureC: number
}

/** Everything the model needs about a unit on one day. */
export interface UnitDay {
  readonly tank: TankSpec
  readonly supplyVoltageV: number
  readonly inletC: number
  readonly runs: RunSource
  /** Today's needs in order of time. */
  readonly needs: readonly ShowerNeed[]
  /** Hours in which a tenant is willing to press; whole day if empty. */
  readonly willing: readonly MinuteInterval[]
  /** Minutes from this local midnight to the next: 1,380 or 1,500 where the clock changes; 1,440 if left out. */
  readonly lengthMin?: number
  /**
   * In step with the needs: the start agreed with whoever presses, elapsed minutes. It holds while it serves as much as the
   * latest start would; `null`, or one that no longer does, is the latest start.
   */
  readonly agreedStartMin?: readonly (number | null)[]
  /** Where the day starts from: what the days before it leave, a cold tank, or given node temperatures. */
  readonly start: { readonly kind: 'periodic' } | { readonly kind: 'cold' } | { readonly kind: 'nodes'; readonly nodesC: readonly number[] }
}

export interface NeedOutcome {
  readonly need: ShowerNeed
  readonly status: 'ready' | 'short' | 'impossible'
  /** Why it is impossible or short, in one plain sentence; empty when ready. */
  readonly reason: string
  readonly minutesWanted: number
  readonly minutesServed: number
  /** Shortest run that serves the need; `null` with status `impossible`. */
  readonly requiredRunMin: number | null
  /** The run that can be counted on. */
  readonly chosenRunMin: number
  /** By how much the run is too short; 0 when ready. */
  readonly shortfallMin: number
  /**
   * Start that meets the need (or serves most of it when short): the one agreed on while that holds, or the latest; `null` when
   * nothing helps. Elapsed minutes from midnight, may be negative.
   */
  readonly startByMin: number | null
  /** The start is one that was agreed on, not the latest. */
  readonly agreed?: true
  /** From the earliest to the latest sensible start, to its end. */
  readonly runWindow: { readonly earliestStartMin: number; readonly latestStartMin: number; readonly endMin: number } | null
  /** The run assumed in the simulation. */
  readonly run: MinuteInterval | null
  /** When the water is ready with that run; `null` when it never is. */
  readonly readyAtMin: number | null
  /** Nearest ready-by minutes that would work with today's hardware, nearest first. */
  readonly nextBestReadyByMin: readonly number[]
}

export interface Readiness {
  readonly status: 'ready' | 'short' | 'impossible' | 'no-need'
  readonly needs: readonly NeedOutcome[]
  readonly runs: readonly MinuteInterval[]
  readonly energyInKwh: number
  readonly energyDeliveredKwh: number
  readonly energyLostKwh: number
  /** When the element is really on, with the run to expect. */
  readonly heating: readonly (MinuteInterval & { readonly powerW: number })[]
  /** Sampled every `sampleMin` over the day for charts. */
  readonly trace: {
    readonly sampleMin: number
    readonly outletC: readonly number[]
    readonly coldestC: readonly number[]
    readonly chargeFraction: readonly number[]
  }
  /** State at the start and the end of the day's cycle: from after the last need before it to after its own last. */
  readonly startNodesC: readonly number[]
  readonly endNodesC: readonly number[]
}
