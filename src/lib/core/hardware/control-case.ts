/** What the control side's checks share: the supply worked out once from the parts on record, and which of its figures are from memory. */
import type { Controller } from '../controller/types.ts'
import { rectifiedPeakV, rippleV } from './control-supply.ts'
import type { Limit, RuleProfile } from './profiles/profile.ts'
import type { Recorded } from './recorded.ts'
import type { ControlSupply } from './types.ts'
import { together } from './verdict.ts'

/** Small transformers rise by 20 to 30 % without load (from memory); the more is taken where nobody read it. */
const REGULATION: Limit & { readonly fraction: number } = {
  fraction: 0.3,
  clause: 'No-load rise of a small transformer taken as 30 %',
  edition: 'from memory',
  confirm: true,
}
/** NE555 at 15 V, no load, at the most (TI SLFS022). */
export const TIMER_SUPPLY_A = 0.015

export interface Supply {
  readonly control: ControlSupply
  readonly controller: Controller
  readonly supplyVoltageV: number | null
  /** DC behind the reservoir, loaded: its peak at nominal mains; at the bottom of the ripple with nominal and with low mains. `null` = not known. */
  readonly peakV: number | null
  readonly loadedV: number | null
  readonly lowestV: number | null
  /** At no load with the mains high. */
  readonly highestV: number | null
  readonly coilA: number | null
  /** A published limit with what the supply's range leans on: from memory unless somebody read the mains, and the regulation. */
  readonly loaded: (limit: Limit) => Limit
  readonly unloaded: (limit: Limit) => Limit
}

export function supplyOf({ circuit }: Recorded, control: ControlSupply, controller: Controller, profile: RuleProfile): Supply {
  const { supplyVoltageV, mainsRangeV } = circuit
  const { transformerSecondaryV: secondaryV, transformerRegulationFraction: regulation, coilOhm, reservoirF } = control
  const range = mainsRangeV && supplyVoltageV !== null ? mainsRangeV : null
  const lowFactor = range && supplyVoltageV !== null ? range.lowestV / supplyVoltageV : profile.mains.lowFactor
  const highFactor = range && supplyVoltageV !== null ? range.highestV / supplyVoltageV : profile.mains.highFactor
  const mains = range ? [] : [profile.mains]
  const peakV = secondaryV === null ? null : rectifiedPeakV(secondaryV)
  const coilA = coilOhm === null || peakV === null ? null : peakV / coilOhm
  const dipV =
    coilA === null || reservoirF === null
      ? null
      : rippleV({ currentA: coilA + TIMER_SUPPLY_A, mainsHz: profile.mains.frequencyHz, reservoirF })
  return {
    control,
    controller,
    supplyVoltageV,
    peakV,
    loadedV: peakV === null || dipV === null ? null : peakV - dipV,
    lowestV: secondaryV === null || dipV === null ? null : rectifiedPeakV(secondaryV, lowFactor) - dipV,
    highestV: secondaryV === null ? null : rectifiedPeakV(secondaryV, (1 + (regulation ?? REGULATION.fraction)) * highFactor),
    coilA,
    loaded: (limit) => together([limit, ...mains]),
    unloaded: (limit) => together([limit, ...mains, ...(regulation === null ? [REGULATION] : [])]),
  }
}
