/** What the screening's tests share: an installation with its parts changed, one check's verdict, and what each check needs to know. */
import { checkHardware } from '#lib/core/hardware/check-hardware.ts'
import type { Circuit, ControlSupply, Installation, ProfileId, Verdict } from '#lib/core/hardware/types.ts'
import type { TankSpec } from '#lib/core/tank/types.ts'
import { CONTROL, installed } from './installations.ts'

export const verdictOf = (installation: Installation, id: string, profile: ProfileId = 'us-nec-2023'): Verdict | undefined =>
  checkHardware(installation, profile).find((one) => one.id === id)?.verdict
const MAINS_READ = { lowestV: 234, highestV: 246 } as const
export const ofControl = (patch: Partial<ControlSupply> = {}, circuit: Partial<Circuit> = {}) =>
  installed({ circuit: { mainsRangeV: MAINS_READ, ...circuit, control: { ...CONTROL, ...patch } } })
export const ofTank = (patch: Partial<TankSpec>): Installation => {
  const one = installed()
  return { ...one, load: { ...one.load, tank: { ...one.load.tank, ...patch } } }
}

/** Every check that the screening is to make, with what it needs to know. */
export const CIRCUIT_NEEDS: Readonly<Record<string, readonly (keyof Circuit)[]>> = {
  'element-voltage': ['supplyVoltageV'],
  'contact-rating': ['supplyVoltageV', 'contactRatingA', 'contactRatingClass'],
  poles: ['supplyVoltageV', 'polesSwitched'],
  'breaker-minimum': ['supplyVoltageV', 'breakerA'],
  'breaker-maximum': ['supplyVoltageV', 'breakerA'],
  conductor: ['supplyVoltageV', 'breakerA', 'conductor', 'ambientC', 'groupedConductors'],
  'voltage-drop': ['supplyVoltageV', 'conductor', 'lengthM'],
  isolator: ['isolatorInSight'],
  'relief-valve': ['reliefValve'],
  separation: ['extraLowVoltageSeparated'],
  'mixing-valve': [],
  expansion: ['closedSystem', 'expansionVessel'],
}
export const CONTROL_NEEDS: Readonly<Record<string, readonly (keyof ControlSupply)[]>> = {
  'coil-voltage': ['transformerSecondaryV', 'coilRatedV', 'coilOhm', 'reservoirF'],
  'control-loop': ['transformerSecondaryV', 'coilRatedV', 'coilOhm', 'reservoirF', 'loopLengthM', 'loopOhmPerKm'],
  'driver-current': ['transformerSecondaryV', 'driver', 'coilOhm'],
  'driver-saturation': ['transformerSecondaryV', 'driver', 'coilOhm'],
  suppression: ['suppression'],
  transformer: ['transformerSecondaryV', 'transformerVa', 'coilOhm'],
  reservoir: ['transformerSecondaryV', 'reservoirRatedV'],
  'primary-fuse': ['transformerVa', 'primaryFuseA'],
}
