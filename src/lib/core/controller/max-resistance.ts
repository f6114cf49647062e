/** The highest timing resistor a chip can be given: where it stalls, and what its makers publish. */
import { IC_FAMILIES, type IcFamily } from './ic-families.ts'

/** Above it the current through the resistor at threshold, a third of the supply across it, is less than the bias: it never times out. */
export const stallingResistanceOhm = ({ supplyV, biasA }: { readonly supplyV: number; readonly biasA: number }): number =>
  supplyV / (3 * biasA)

/**
 * Three rules are published for bipolar chips: TI SLFS022 note 2, 3.4 MΩ at 5 V and 10 MΩ at 15 V; ST Doc 2182 note 2, 3.5 and
 * 20 MΩ; Fairchild LM555 note 4, 6.7 and 20 MΩ. The last two are V / (3 · 250 nA), at which nothing is left over, and forget the
 * discharge pin. TI's is half of it, and is taken: it is the strictest, so any maker's chip keeps it, and the current then is
 * twice what the worst threshold takes. For CMOS chips no rule was found; the same is applied to their worse pin.
 */
const CURRENT_MARGIN = 2

export const publishedMaxOhm = ({ supplyV, icFamily }: { readonly supplyV: number; readonly icFamily: IcFamily }): number =>
  stallingResistanceOhm({ supplyV, biasA: IC_FAMILIES[icFamily].worstPinA }) / CURRENT_MARGIN
