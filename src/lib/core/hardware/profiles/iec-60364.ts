/** IEC 60364 where no national profile is here; its capacity column is known from memory and is shown as such. */
import { gbBs7671 } from './gb-bs7671.ts'
import type { RuleProfile } from './profile.ts'

const EDITION = 'edition not stated in the copies read'
const MEMORY = 'from memory'
const METHOD_C_A: Readonly<Record<string, number>> = { '1': 15, '1.5': 19.5, '2.5': 27, '4': 36, '6': 46, '10': 63 }

export const iec60364: RuleProfile = {
  id: 'iec-60364',
  name: 'IEC 60364',
  continuous: { factor: 1, upToVolumeL: null, clause: 'IEC 60364-4-43, I_b ≤ I_n ≤ I_z', edition: EDITION, confirm: false },
  largestDevice: { kind: 'of-conductor', clause: 'IEC 60364-4-43, I_n ≤ I_z', edition: EDITION, confirm: false },
  deviceSizesA: gbBs7671.deviceSizesA,
  conductors: {
    system: 'mm2',
    clause: 'IEC 60364-5-52 table B.52.2, PVC, method C',
    edition: MEMORY,
    confirm: true,
    // Resistances are of the same copper: the published mV/A/m at 70 °C.
    rows: gbBs7671.conductors.rows.map((row) => ({ ...row, ampacityA: { 70: METHOD_C_A[row.size] ?? 0 } })),
  },
  terminals: null,
  ambient: { ...gbBs7671.ambient, clause: 'IEC 60364-5-52 table B.52.14, PVC' },
  grouping: { ...gbBs7671.grouping, clause: 'IEC 60364-5-52 table B.52.17, circuits together, two conductors each' },
  insulated: { factor: 0.5, clause: 'BS 7671 regulation 523, for want of an IEC figure', edition: EDITION, confirm: true },
  nextSizeUp: false,
  voltageDrop: { fraction: 0.05, clause: 'IEC 60364-5-52 annex G', edition: MEMORY, confirm: true },
  poles: {
    clause: 'Double-pole switching of water heaters',
    edition: 'common practice, no source',
    confirm: true,
    rows: [{ upToV: Infinity, poles: 2 }],
  },
  isolator: { clause: 'IEC 60364-5-53, isolation', edition: MEMORY, confirm: true },
  reliefValve: gbBs7671.reliefValve,
  separation: { clause: 'IEC 60364-4-41 clause 414, SELV and PELV', edition: MEMORY, confirm: true },
  mains: gbBs7671.mains,
  heaterDemand: { ...gbBs7671.heaterDemand, clause: 'On-Site Guide table A2, for want of an IEC figure: no diversity', confirm: true },
  dwellingDemand: null,
  defers:
    'Screening against IEC 60364 figures, partly from memory. The national code in force and a licensed electrician of the country decide.',
}
