/** IEC 60364 where no national profile is here; its capacity column is known from memory and is shown as such. */
import { gbBs7671 } from './gb-bs7671.ts'
import type { RuleProfile } from './profile.ts'

const IEC_METHOD_C_A: Readonly<Record<string, number>> = { '1': 15, '1.5': 19.5, '2.5': 27, '4': 36, '6': 46, '10': 63 }

export const iec60364: RuleProfile = {
  ...gbBs7671,
  id: 'iec-60364',
  name: 'IEC 60364',
  continuous: { factor: 1, upToVolumeL: null, clause: 'IEC 60364-4-43: I_b ≤ I_n ≤ I_z', confirm: false },
  conductors: {
    ...gbBs7671.conductors,
    clause: 'IEC 60364-5-52 table B.52.2, PVC, method C',
    confirm: true,
    rows: gbBs7671.conductors.rows.map((row) => ({ ...row, ampacityA: { 70: IEC_METHOD_C_A[row.size] ?? 0 } })),
  },
  voltageDrop: { fraction: 0.05, clause: 'IEC 60364-5-52 annex G', confirm: true },
  polesToSwitch: { poles: 2, clause: 'Double-pole switching of water heaters: common practice, no source', confirm: true },
  isolator: { clause: 'IEC 60364-5-53: isolation', confirm: true },
  defers: 'Screening against IEC 60364 figures partly from memory. The national code in force decides.',
}
