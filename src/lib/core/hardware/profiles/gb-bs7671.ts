/** United Kingdom: BS 7671 and the On-Site Guide as quoted in trade pages; the standard itself was not available. */
import type { RuleProfile } from './profile.ts'

/** Resistance at 70 °C from the published mV/A/m of two-core cable: out and back, so half of it per conductor. */
const perConductor = (millivoltPerAmpereMetre: number): number => millivoltPerAmpereMetre / 2

export const gbBs7671: RuleProfile = {
  id: 'gb-bs7671',
  name: 'BS 7671 (United Kingdom)',
  continuous: { factor: 1, upToVolumeL: null, clause: 'BS 7671: I_b ≤ I_n ≤ I_z', confirm: false },
  largestDevice: null,
  deviceSizesA: [6, 10, 13, 16, 20, 25, 32, 40, 45, 50, 63],
  conductors: {
    system: 'mm2',
    clause: 'BS 7671 table 4D5, flat twin, method C',
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
  ambient: {
    clause: 'BS 7671 table 4B1, thermoplastic (from memory)',
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
    clause: 'BS 7671 table 4C1, circuits together, two conductors each (from memory)',
    confirm: true,
    rows: [
      { upTo: 2, factor: 1 },
      { upTo: 4, factor: 0.8 },
      { upTo: 6, factor: 0.7 },
      { upTo: 8, factor: 0.65 },
      { upTo: 10, factor: 0.6 },
    ],
  },
  nextSizeUp: false,
  voltageDrop: { fraction: 0.05, clause: 'BS 7671 appendix 4, section 6.4', confirm: false },
  polesToSwitch: { poles: 2, clause: 'On-Site Guide: double-pole switch for a water heater', confirm: false },
  isolator: { clause: 'On-Site Guide: local double-pole isolation', confirm: false },
  defers: 'Screening against published excerpts of BS 7671. The current edition and a qualified person decide.',
}
