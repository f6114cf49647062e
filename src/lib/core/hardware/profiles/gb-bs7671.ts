/** United Kingdom: BS 7671 and the On-Site Guide as quoted in trade pages; the standard itself was not available. */
import type { RuleProfile } from './profile.ts'

/** The copies read are of 2012 to 2026 and do not say which amendment they quote. */
const EDITION = 'edition not stated in the copies read'
const MEMORY = 'from memory'
/** Resistance at 70 °C from the published mV/A/m of two-core cable: out and back, so half of it per conductor. */
const perConductor = (millivoltPerAmpereMetre: number): number => millivoltPerAmpereMetre / 2

export const gbBs7671: RuleProfile = {
  id: 'gb-bs7671',
  name: 'BS 7671 (United Kingdom)',
  continuous: { factor: 1, upToVolumeL: null, clause: 'BS 7671, I_b ≤ I_n ≤ I_z', edition: EDITION, confirm: false },
  largestDevice: { kind: 'of-conductor', clause: 'BS 7671, I_n ≤ I_z', edition: EDITION, confirm: false },
  deviceSizesA: [6, 10, 13, 16, 20, 25, 32, 40, 45, 50, 63, 80, 100],
  conductors: {
    system: 'mm2',
    // 4D5 is 70 °C PVC flat twin; a web guide that calls it 90 °C XLPE is wrong. 10 mm²: 64 A, one page prints 65.
    clause: 'BS 7671 table 4D5, flat twin, method C',
    edition: EDITION,
    confirm: false,
    rows: [
      { size: '1', ampacityA: { 70: 16 }, capA: null, ohmPerKm: perConductor(44), confirm: true },
      { size: '1.5', ampacityA: { 70: 20 }, capA: null, ohmPerKm: perConductor(29), confirm: true },
      { size: '2.5', ampacityA: { 70: 27 }, capA: null, ohmPerKm: perConductor(18) },
      { size: '4', ampacityA: { 70: 37 }, capA: null, ohmPerKm: perConductor(11) },
      { size: '6', ampacityA: { 70: 47 }, capA: null, ohmPerKm: perConductor(7.3) },
      { size: '10', ampacityA: { 70: 64 }, capA: null, ohmPerKm: perConductor(4.4) },
    ],
  },
  terminals: null,
  ambient: {
    clause: 'BS 7671 table 4B1, thermoplastic',
    edition: MEMORY,
    confirm: true,
    rows: [
      { upToC: 30, factor: { 70: 1 } },
      { upToC: 35, factor: { 70: 0.94 } },
      { upToC: 40, factor: { 70: 0.87 } },
      { upToC: 45, factor: { 70: 0.79 } },
      { upToC: 50, factor: { 70: 0.71 } },
    ],
  },
  grouping: {
    clause: 'BS 7671 table 4C1, circuits together, two conductors each',
    edition: MEMORY,
    confirm: true,
    rows: [
      { upTo: 2, factor: 1 },
      { upTo: 4, factor: 0.8 },
      { upTo: 6, factor: 0.7 },
      { upTo: 8, factor: 0.65 },
      { upTo: 10, factor: 0.6 },
    ],
  },
  insulated: { factor: 0.5, clause: 'BS 7671 regulation 523, more than 0.5 m in thermal insulation', edition: EDITION, confirm: false },
  nextSizeUp: false,
  voltageDrop: { fraction: 0.05, clause: 'BS 7671 appendix 4, section 6.4', edition: EDITION, confirm: false },
  poles: {
    // The own circuit and the double-pole switch are guidance of the On-Site Guide, not a regulation of BS 7671.
    clause: 'On-Site Guide, double-pole switch for a water heater',
    edition: 'as quoted in 2012',
    confirm: false,
    rows: [{ upToV: Infinity, poles: 2 }],
  },
  isolator: { clause: 'On-Site Guide, local double-pole isolation', edition: EDITION, confirm: false },
  reliefValve: { clause: 'IEC 60335-2-21 clauses 22 and 24, closed water heaters', edition: MEMORY, confirm: true },
  separation: { clause: 'BS 7671 regulation 528.1, band I apart from band II', edition: MEMORY, confirm: true },
  mains: { lowFactor: 0.94, highFactor: 1.1, frequencyHz: 50, clause: '230 V +10 % / −6 %', edition: MEMORY, confirm: true },
  heaterDemand: {
    clause: 'On-Site Guide table A2, thermostatic water heaters: no diversity',
    edition: 'as quoted in the Electrician’s Guide, 5th edition',
    confirm: false,
    rows: [{ fromCount: 1, factor: 1 }],
  },
  dwellingDemand: null,
  defers: 'Screening against published excerpts of BS 7671. The edition in force and a competent, registered electrician decide.',
}
