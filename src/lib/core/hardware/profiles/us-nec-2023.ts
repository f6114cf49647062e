/** United States: NEC 2017 to 2023 as quoted in trade press and teaching pages; the code text itself was not available. */
import type { RuleProfile } from './profile.ts'

/** Chapter 9 table 8, copper at 75 °C, solid to 8 AWG and stranded above, from Ω per 1,000 ft. */
const perKm = (ohmPerKft: number): number => ohmPerKft * 3.28084

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
      { size: '14', ampacityA: { 60: 15, 75: 20, 90: 25 }, capA: 15, ohmPerKm: perKm(3.07) },
      { size: '12', ampacityA: { 60: 20, 75: 25, 90: 30 }, capA: 20, ohmPerKm: perKm(1.93) },
      { size: '10', ampacityA: { 60: 30, 75: 35, 90: 40 }, capA: 30, ohmPerKm: perKm(1.21) },
      { size: '8', ampacityA: { 60: 40, 75: 50, 90: 55 }, capA: null, ohmPerKm: perKm(0.764) },
      { size: '6', ampacityA: { 60: 55, 75: 65, 90: 75 }, capA: null, ohmPerKm: perKm(0.491) },
      { size: '4', ampacityA: { 60: 70, 75: 85, 90: 95 }, capA: null, ohmPerKm: perKm(0.308) },
    ],
  },
  ambient: {
    clause: 'NEC 310.15(B)(1), 2017–2023',
    confirm: false,
    rows: [
      { upToC: 30, factor: { 60: 1, 75: 1, 90: 1 } },
      // Between 31 and 35 °C the table was not read; the next row is used, which is smaller.
      { upToC: 40, factor: { 60: 0.82, 75: 0.88, 90: 0.91 } },
      { upToC: 45, factor: { 60: 0.71, 75: 0.82, 90: 0.87 } },
    ],
  },
  grouping: {
    clause: 'NEC 310.15(C)(1), current-carrying conductors together, 2017–2023',
    confirm: false,
    rows: [
      { upTo: 3, factor: 1 },
      { upTo: 6, factor: 0.8 },
      { upTo: 9, factor: 0.7 },
      { upTo: 20, factor: 0.5 },
    ],
  },
  nextSizeUp: true,
  voltageDrop: { fraction: 0.03, clause: 'NEC 210.19(A) informational note: a recommendation', confirm: false },
  polesToSwitch: { poles: 2, clause: 'NEC 404.15(B): an OFF position opens all ungrounded conductors', confirm: false },
  isolator: { clause: 'NEC 422.31(B): within sight or lockable open', confirm: false },
  defers: 'Screening against published excerpts of the NEC. The edition adopted where the building stands, and its inspector, decide.',
}
