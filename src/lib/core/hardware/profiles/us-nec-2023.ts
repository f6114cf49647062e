/** United States: NEC 2017 to 2023 as quoted in trade press and teaching pages; the code text itself was not available. */
import type { RuleProfile } from './profile.ts'

export const usNec2023: RuleProfile = {
  id: 'us-nec-2023',
  name: 'NEC 2023 (United States)',
  continuous: { factor: 1.25, upToVolumeL: 450, clause: 'NEC 422.13 and 422.10(A), 2017–2023', confirm: false },
  largestDevice: { factor: 1.5, smallLoadA: 13.3, smallDeviceA: 20, clause: 'NEC 422.11(E), 2017–2023', confirm: false },
  deviceSizesA: [15, 20, 25, 30, 35, 40, 45, 50, 60, 70, 80, 90, 100, 110, 125, 150, 175, 200],
  conductors: {
    system: 'awg',
    clause: 'NEC 310.16 and 240.4(D), 2017–2023',
    confirm: false,
    rows: [
      { size: '14', ampacityA: { 60: 15, 75: 20, 90: 25 }, capA: 15, ohmPerKm: 8.45 },
      { size: '12', ampacityA: { 60: 20, 75: 25, 90: 30 }, capA: 20, ohmPerKm: 5.31 },
      { size: '10', ampacityA: { 60: 30, 75: 35, 90: 40 }, capA: 30, ohmPerKm: 3.34 },
      { size: '8', ampacityA: { 60: 40, 75: 50, 90: 55 }, capA: null, ohmPerKm: 2.1 },
      { size: '6', ampacityA: { 60: 55, 75: 65, 90: 75 }, capA: null, ohmPerKm: 1.32 },
      { size: '4', ampacityA: { 60: 70, 75: 85, 90: 95 }, capA: null, ohmPerKm: 0.83 },
    ],
  },
  voltageDrop: { fraction: 0.03, clause: 'NEC 210.19(A) informational note: a recommendation', confirm: false },
  polesToSwitch: { poles: 2, clause: 'NEC 404.15(B): an OFF position opens all ungrounded conductors', confirm: false },
  isolator: { clause: 'NEC 422.31(B): within sight or lockable open', confirm: false },
  defers: 'Screening against published excerpts of the NEC. The edition adopted where the building stands, and its inspector, decide.',
}
