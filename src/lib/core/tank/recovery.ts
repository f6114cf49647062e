/** The trade's recovery rate: water that an element heats through a rise in an hour, nothing lost. */

/** 3412 Btu/kWh over 8.33 lb/gal of water near 68 °F. Sources conflict by 0.9 % (8.2938 in WHAM, W/2.42 by one maker); 8.33 is what tables use. */
const BTU_PER_KWH = 3_412
const BTU_PER_GAL_F = 8.33

export interface Recovery {
  readonly powerW: number
  readonly riseF: number
  /** Default 1, as the published tables. */
  readonly efficiencyFraction?: number
}

export const recoveryGalPerH = ({ powerW, riseF, efficiencyFraction = 1 }: Recovery): number =>
  ((powerW / 1_000) * BTU_PER_KWH * efficiencyFraction) / (BTU_PER_GAL_F * riseF)
