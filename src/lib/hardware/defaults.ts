/** What stands for a figure that nobody entered, in one place: the roster, the form and the page name it as a default. Shared with the browser. */
import type { Controller } from '#lib/core/controller/types.ts'
import type { Circuit, Installation } from '#lib/core/hardware/types.ts'
import { SHARE_ABOVE_UPPER_FRACTION } from '#lib/core/tank/defaults.ts'
import type { LossRating, TankSpec } from '#lib/core/tank/types.ts'

/** Tolerances as usually printed on such parts: common practice, no source. */
export const DEFAULT_TOLERANCE_FRACTION = { dial: 0.1, fixed: 0.05, resistor: 0.05, capacitor: 0.2 } as const
export const DEFAULT_SCALE_MAX_MIN = 120
export const DEFAULT_TIMER_SUPPLY_V = 12
export const DEFAULT_SWITCH_STEP_MIN = 15
/** The middle of the label's classes A+ to F: common practice, no source. */
export const DEFAULT_LOSS: LossRating = { kind: 'class', label: 'C' }
export const DEFAULT_TANK = {
  setPointC: 60,
  /** 10 °F, as many storage thermostats are built: common practice, no source. */
  deadBandK: 5.5,
  ambientC: 20,
  shareAboveUpperFraction: SHARE_ABOVE_UPPER_FRACTION,
} as const satisfies Partial<TankSpec>

/** What a newly chosen kind of controller starts with; everything is asked for on the same screen. */
export function blankController(kind: Controller['kind']): Controller {
  switch (kind) {
    case 'dial':
      return { kind, settingMin: 60, scaleMaxMin: DEFAULT_SCALE_MAX_MIN, toleranceFraction: DEFAULT_TOLERANCE_FRACTION.dial }
    case 'one-shot-fixed':
      return { kind, settingMin: 60, toleranceFraction: DEFAULT_TOLERANCE_FRACTION.fixed }
    case 'one-shot-rc':
      return {
        kind,
        resistanceOhm: 8.2e6,
        resistanceToleranceFraction: DEFAULT_TOLERANCE_FRACTION.resistor,
        capacitanceF: 330e-6,
        capacitanceToleranceFraction: DEFAULT_TOLERANCE_FRACTION.capacitor,
        supplyV: DEFAULT_TIMER_SUPPLY_V,
        icFamily: 'cmos',
        leakage: { kind: 'unknown' },
      }
    case 'time-switch':
      return {
        kind,
        stepMin: DEFAULT_SWITCH_STEP_MIN,
        programme: [{ weekday: null, onMin: 300, offMin: 420 }],
        followsClockChange: false,
        driftMin: 0,
        powerReserveH: null,
      }
    case 'supplier-contactor':
      return { kind, windows: [{ weekday: null, onMin: 0, offMin: 420 }] }
  }
}

/** Everything about the circuit is not known until somebody looks. */
export const unknownCircuit = (supplyVoltageV: number): Circuit => ({
  supplyVoltageV,
  breakerA: null,
  conductor: null,
  lengthM: null,
  ambientC: null,
  groupedConductors: null,
  contactRatingA: null,
  contactRatingClass: null,
  polesSwitched: null,
  isolatorInSight: null,
  reliefValve: null,
  expansionVessel: null,
  closedSystem: null,
  extraLowVoltageSeparated: null,
  control: null,
})

/** An ordinary tank on the property's supply, to be corrected. */
export const blankInstallation = (supplyVoltageV: number): Installation => ({
  load: {
    kind: 'storage-heater',
    tank: {
      nominalVolumeL: 150,
      actualVolumeL: null,
      heightM: null,
      loss: DEFAULT_LOSS,
      upperElement: null,
      lowerElement: { ratedPowerW: 3_000, ratedVoltageV: supplyVoltageV },
      mixingValveC: null,
      ...DEFAULT_TANK,
    },
  },
  controller: blankController('dial'),
  circuit: unknownCircuit(supplyVoltageV),
})
