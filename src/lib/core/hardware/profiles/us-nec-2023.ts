/**
 * United States: the NEC as quoted in trade press and teaching pages; the code text itself was not available. Section numbers are
 * those of 2017 to 2023; the 2026 edition moves article 220 to 120.
 */
import type { RuleProfile } from './profile.ts'

const EDITION = '2017–2023'
/** Chapter 9 table 8, copper at 75 °C, solid to 8 AWG and stranded above, from Ω per 1,000 ft. */
const perKm = (ohmPerKft: number): number => ohmPerKft * 3.28084

/**
 * Table 220.84: 23 rows from memory; 3–5, 10, 12, 15, 20 and 62 and over were confirmed in secondary copies. Tables that run 11–15
 * 42 % … 63 and over 35 %, or give 40 units 32 %, circulate and are wrong.
 */
const DWELLINGS = [
  [5, 45], [7, 44], [10, 43], [11, 42], [13, 41], [15, 40], [17, 39], [20, 38], [21, 37], [23, 36], [25, 35], [27, 34],
  [30, 33], [31, 32], [33, 31], [36, 30], [38, 29], [42, 28], [45, 27], [50, 26], [55, 25], [61, 24], [Infinity, 23],
] as const // prettier-ignore

export const usNec2023: RuleProfile = {
  id: 'us-nec-2023',
  name: 'NEC 2023 (United States)',
  continuous: { factor: 1.25, upToVolumeL: 450, clause: 'NEC 422.13 and 422.10(A)', edition: EDITION, confirm: false },
  // 125 % is the least and 150 % the most: they do not contradict each other. 240.4(D) still caps the device on small conductors.
  largestDevice: {
    kind: 'of-load',
    factor: 1.5,
    smallLoadA: 13.3,
    smallDeviceA: 20,
    clause: 'NEC 422.11(E)',
    edition: EDITION,
    confirm: false,
  },
  // 240.6(A); the 2023 edition adds 10 A.
  deviceSizesA: [10, 15, 20, 25, 30, 35, 40, 45, 50, 60, 70, 80, 90, 100, 110, 125, 150, 175, 200, 225, 250, 300, 350, 400, 450, 500, 600],
  conductors: {
    system: 'awg',
    clause: 'NEC 310.16 and 240.4(D)',
    edition: EDITION,
    confirm: false,
    // Older copies print 20 and 25 A for 14 and 12 AWG at 60 °C; the current table's 15 and 20 A are kept.
    rows: [
      { size: '14', ampacityA: { 60: 15, 75: 20, 90: 25 }, capA: 15, ohmPerKm: perKm(3.07) },
      { size: '12', ampacityA: { 60: 20, 75: 25, 90: 30 }, capA: 20, aluminiumCapA: 15, ohmPerKm: perKm(1.93) },
      { size: '10', ampacityA: { 60: 30, 75: 35, 90: 40 }, capA: 30, aluminiumCapA: 25, ohmPerKm: perKm(1.21) },
      { size: '8', ampacityA: { 60: 40, 75: 50, 90: 55 }, capA: null, ohmPerKm: perKm(0.764) },
      { size: '6', ampacityA: { 60: 55, 75: 65, 90: 75 }, capA: null, ohmPerKm: perKm(0.491) },
      { size: '4', ampacityA: { 60: 70, 75: 85, 90: 95 }, capA: null, ohmPerKm: perKm(0.308) },
    ],
  },
  terminals: { usualC: 60, clause: 'NEC 110.14(C)(1)(a)', edition: EDITION, confirm: false },
  ambient: {
    clause: 'NEC 310.15(B)(1)',
    edition: EDITION,
    confirm: false,
    rows: [
      { upToC: 30, factor: { 60: 1, 75: 1, 90: 1 } },
      // Between 31 and 35 °C the table was not read; the next row is used, which is smaller.
      { upToC: 40, factor: { 60: 0.82, 75: 0.88, 90: 0.91 } },
      { upToC: 45, factor: { 60: 0.71, 75: 0.82, 90: 0.87 } },
    ],
  },
  grouping: {
    clause: 'NEC 310.15(C)(1), current-carrying conductors together',
    edition: EDITION,
    confirm: false,
    rows: [
      { upTo: 3, factor: 1 },
      { upTo: 6, factor: 0.8 },
      { upTo: 9, factor: 0.7 },
      { upTo: 20, factor: 0.5 },
    ],
  },
  insulated: null,
  nextSizeUp: true,
  voltageDrop: { fraction: 0.03, clause: 'NEC 210.19(A) informational note, a recommendation', edition: EDITION, confirm: false },
  poles: {
    clause: 'NEC 404.15(B), an OFF position opens all ungrounded conductors',
    edition: 'as quoted from 2008',
    confirm: false,
    // A 120 V circuit has one ungrounded conductor; 208 and 240 V ones have two.
    rows: [
      { upToV: 130, poles: 1 },
      { upToV: Infinity, poles: 2 },
    ],
  },
  isolator: { clause: 'NEC 422.31(B) and 110.25, within sight or lockable open', edition: EDITION, confirm: false },
  reliefValve: { clause: 'NEC 422.47, marked to require a relief valve', edition: EDITION, confirm: false },
  separation: { clause: 'NEC 725.136', edition: EDITION, confirm: false },
  mains: {
    lowFactor: 0.95,
    highFactor: 1.05,
    frequencyHz: 60,
    clause: 'ANSI C84.1 range A, service',
    edition: 'from memory',
    confirm: true,
  },
  heaterDemand: {
    clause: 'NEC 220.53, four or more fastened appliances',
    edition: EDITION,
    confirm: false,
    rows: [
      { fromCount: 1, factor: 1 },
      { fromCount: 4, factor: 0.75 },
    ],
  },
  dwellingDemand: {
    clause: 'NEC table 220.84',
    edition: '2017–2023, from memory',
    confirm: true,
    rows: DWELLINGS.map(([upToUnits, percent]) => ({ upToUnits, factor: percent / 100 })),
  },
  defers:
    'Screening against published excerpts of the NEC. The edition adopted where the building stands, its inspector and a licensed electrician decide.',
}
