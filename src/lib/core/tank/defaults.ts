/** The tank model's constants, each with its source and, where sources conflict, why this one. */
import { heatCapacityJPerLK } from './water.ts'

/** OCHRE and HPWHsim both use 12; the node count tunes numerical mixing (Kleinbach, Beckman and Klein 1993: from memory). */
export const NODES = 12
/** Actual volume of an electric tank over its nominal (OpenStudio-HPXML `calc_storage_tank_actual_vol`). */
export const ACTUAL_VOLUME_FRACTION = 0.9
/**
 * ρc of water at 40 °C (water.ts; IAPWS-95: 4,146.9 J/(L·K)). One value, so that energy is conserved exactly; the true one is
 * 1.4 % more at 5 °C and 1.2 % less at 70 °C. OCHRE uses 4,183, HPWHsim 4,159.
 */
export const HEAT_CAPACITY_J_PER_L_K = heatCapacityJPerLK(40)
/** EnergyPlus Engineering Reference, stratified tank: 0.6 W/(m·K); OCHRE 0.6406, HPWHsim 0.62. */
export const CONDUCTIVITY_W_PER_M_K = 0.6
/** One third (HPWHsim, inspectors' references); OCHRE and the trade say one quarter, which is quicker to a shower. The slower is the safer default. */
export const SHARE_ABOVE_UPPER_FRACTION = 1 / 3
/**
 * Two of twelve nodes below the lower element, as OCHRE has it; HPWHsim has none. The formula that derives the loss from a UEF
 * takes a fifth of the tank as cold (Maguire and Roberts 2020), so this share returns the rating to 0.2 %, and none misses it by
 * 2.4 %. It is also the more careful choice for hygiene and for how much a full tank serves; a tank that differs is given its own.
 */
export const SHARE_BELOW_LOWER_FRACTION = 1 / 6
/** Height over diameter where the height is not known (common practice, no source). */
export const HEIGHT_TO_DIAMETER = 2.6
/** A shower minute is served at or above the use temperature less this (the product's own rule). */
export const SERVED_MARGIN_K = 1
/**
 * How long before the latest start a run may sensibly be started. Earlier starts lose heat for nothing: a 170 L tank of
 * 1.15 W/K cools by about 0.4 K in three hours.
 */
export const WINDOW_LENGTH_MIN = 180
/** Longest run that is searched for. Half a day heats 1,000 L by 45 K at 4.5 kW. */
export const LONGEST_RUN_MIN = 720
