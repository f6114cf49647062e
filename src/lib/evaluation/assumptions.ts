/** The figures an assessment rests on, each with where it is known from; what the "Why?" of a finding opens with. */
import type { Assumption } from '#db/queries/evaluation.ts'
import { describeController } from '#lib/core/controller/describe.ts'
import type { DurationOutcome } from '#lib/core/controller/types.ts'
import { HEIGHT_TO_DIAMETER, NODES, SHARE_ABOVE_UPPER_FRACTION, SHARE_BELOW_LOWER_FRACTION } from '#lib/core/tank/defaults.ts'
import { lossWPerK } from '#lib/core/tank/loss.ts'
import { actualVolumeL, tankPowerW } from '#lib/core/tank/model.ts'
import { recoveryGalPerH } from '#lib/core/tank/recovery.ts'
import { fFromC, lFromUsGal, usGalFromL } from '#lib/core/units.ts'
import { DEFAULT_TANK } from '#lib/hardware/defaults.ts'
import { clockOffsetMin } from './unit-day.ts'
import type { DayContext, Site, UnitHardware } from './types.ts'

/** Both scales: a finding is read by the landlord's office and by an electrician with a label in hand. */
export const bothC = (temperatureC: number): string => `${temperatureC.toFixed(1)} °C (${Math.round(fFromC(temperatureC))} °F)`
const bothL = (volumeL: number): string => `${Math.round(volumeL)} L (${Math.round(usGalFromL(volumeL))} US gal)`
export const minutes = (durationMin: number): string => `${Number(durationMin.toFixed(1))} min`

interface Given {
  readonly site: Site
  readonly context: DayContext
  readonly hardware: UnitHardware
  readonly duration: DurationOutcome
}

export function assumptionsOf({ site, context, hardware, duration }: Given): readonly Assumption[] {
  const { tank } = hardware.installation.load
  const volumeL = actualVolumeL(tank)
  return [
    {
      name: 'Water in the tank',
      value: tank.actualVolumeL === null ? `${bothL(volumeL)}, 0.90 of nominal` : bothL(volumeL),
      from: tank.actualVolumeL === null ? 'default' : 'entered',
    },
    { name: 'Set point', value: bothC(tank.setPointC), from: 'entered' },
    { name: 'Supply voltage', value: `${site.supplyVoltageV} V`, from: 'entered' },
    { name: 'Element power at that voltage', value: `${Math.round(tankPowerW(tank, site.supplyVoltageV))} W`, from: 'computed' },
    { name: 'Recovery', value: recoverySaid(tankPowerW(tank, site.supplyVoltageV), tank.setPointC - context.inletC), from: 'computed' },
    {
      name: 'Standing loss',
      value: `${lossWPerK(tank.loss, volumeL).toFixed(2)} W/K`,
      from: tank.loss.kind === 'ua' ? 'entered' : 'computed',
    },
    {
      name: 'Share above the upper element',
      value: tank.shareAboveUpperFraction.toFixed(2),
      from: Math.abs(tank.shareAboveUpperFraction - SHARE_ABOVE_UPPER_FRACTION) < 1e-9 ? 'default' : 'entered',
    },
    {
      name: 'Share below the lower element',
      value: (tank.shareBelowLowerFraction ?? SHARE_BELOW_LOWER_FRACTION).toFixed(2),
      from: tank.shareBelowLowerFraction === undefined ? 'default' : 'entered',
    },
    {
      name: 'Height of the water',
      value: tank.heightM === null ? `${HEIGHT_TO_DIAMETER} times its width` : `${tank.heightM.toFixed(2)} m`,
      from: tank.heightM === null ? 'default' : 'entered',
    },
    { name: 'Thermostat’s dead band', value: `${tank.deadBandK.toFixed(1)} K`, from: defaultOr(tank.deadBandK === DEFAULT_TANK.deadBandK) },
    { name: 'Room around the tank', value: bothC(tank.ambientC), from: defaultOr(tank.ambientC === DEFAULT_TANK.ambientC) },
    { name: 'Layers of water reckoned with', value: String(NODES), from: 'default' },
    { name: 'Cold water', value: bothC(context.inletC), from: site.climate.kind === 'months' ? 'measured' : 'computed' },
    { name: 'Controller', value: describeController(hardware.installation.controller), from: 'entered' },
    ...runAssumptions({ site, context, hardware, duration }),
  ]
}

const defaultOr = (isDefault: boolean): Assumption['from'] => (isDefault ? 'default' : 'entered')

/** The trade's recovery rate at this supply, through the rise from today's cold water to the set point. */
const recoverySaid = (powerW: number, riseK: number): string =>
  riseK <= 0
    ? 'none needed'
    : `${Math.round(lFromUsGal(recoveryGalPerH({ powerW, riseF: riseK * F_PER_K })))} L/h through ${Math.round(riseK)} K`
const F_PER_K = 9 / 5

function runAssumptions({ site, context, hardware, duration }: Given): readonly Assumption[] {
  const { controller } = hardware.installation
  if (controller.kind === 'time-switch') {
    const aheadMin = controller.driftMin + (controller.followsClockChange ? 0 : clockOffsetMin(hardware, { site, context }))
    return [{ name: 'Its clock', value: clockSaid(aheadMin), from: controller.followsClockChange ? 'entered' : 'computed' }]
  }
  if (controller.kind === 'supplier-contactor') return []
  return [
    {
      name: 'Run to count on',
      value: minutes(duration.guaranteed.minMin),
      from: duration.source === 'setting' ? 'entered' : duration.source,
    },
  ]
}

export const clockSaid = (aheadMin: number): string =>
  Math.abs(aheadMin) < 1 ? 'right' : `${Math.round(Math.abs(aheadMin))} min ${aheadMin > 0 ? 'fast' : 'slow'}`
