/** The tank model's constants, each with its source and, where sources conflict, why this one. */

/** OCHRE and HPWHsim both use 12; the node count tunes numerical mixing (Kleinbach, Beckman and Klein 1993: from memory). */
export const NODES = 12
/** Actual volume of an electric tank over its nominal (OpenStudio-HPXML `calc_storage_tank_actual_vol`). */
export const ACTUAL_VOLUME_FRACTION = 0.9
/** ρc of water at 40 °C: 992.216 kg/m³ × 4.1794 kJ/(kg·K) (IAPWS-95). One value, so that energy is conserved exactly; ±1.4 % from 5 to 70 °C. */
export const HEAT_CAPACITY_J_PER_L_K = 4_146.9
/** EnergyPlus Engineering Reference, stratified tank: 0.6 W/(m·K); OCHRE 0.6406, HPWHsim 0.62. */
export const CONDUCTIVITY_W_PER_M_K = 0.6
/** One third (HPWHsim, inspectors' references); OCHRE and the trade say one quarter, which is quicker to a shower. The slower is the safer default. */
export const SHARE_ABOVE_UPPER_FRACTION = 1 / 3
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
