/** The relay's coil: the voltage that reaches it when the supply is weak, cold and warm, and the heat when it is strong. */
import type { Supply } from './control-case.ts'
import { coilV, warmCoilFactor } from './control-supply.ts'
import { volt } from './figures.ts'
import type { Check } from './types.ts'
import { check, notKnown, published } from './verdict.ts'

/** A power relay's published must-operate voltage: 75 % of its coil's (TE/P&B catalogue 1308242). */
const MUST_OPERATE_FRACTION = 0.75
/** A coil that has worked for long in a warm box (derived in published relay data: about 65 °C). */
const WARM_COIL_C = 65
/** A definite-purpose contactor's published highest coil voltage: 15 V of 12 (TE P30/P40). */
const HIGHEST_COIL_FRACTION = 1.25
/**
 * Above it an 86 Ω relay coil passes 140 °C in air of 25 °C. Editions differ on its limit, 140 °C (2003) and 155 °C (2018): the
 * lower is kept, since nobody knows which edition's relay is fitted.
 */
const BURNING_COIL_FRACTION = 1.65

export const coilChecks = (supply: Supply): readonly Check[] => [coil(supply), loop(supply)]

function coil({ control, highestV, loadedV, lowestV, unloaded }: Supply): Check {
  const limit = unloaded(published('Relay data: must operate at 75 % of coil voltage (TE 1308242), highest 125 % (TE P30/P40)', '2003'))
  const { coilRatedV } = control
  const base = {
    id: 'coil-voltage',
    title: 'Coil on this supply',
    limit:
      coilRatedV === null
        ? 'coil voltage not known'
        : `${volt(coilRatedV * MUST_OPERATE_FRACTION)} to ${volt(coilRatedV * HIGHEST_COIL_FRACTION)}`,
  }
  if (coilRatedV === null || loadedV === null || lowestV === null || highestV === null)
    return notKnown(limit, base, 'Enter the transformer’s secondary, the coil’s voltage and resistance and the reservoir capacitor.')
  const pullInV = coilRatedV * MUST_OPERATE_FRACTION
  const weak = loadedV < pullInV
  const burns = highestV > coilRatedV * BURNING_COIL_FRACTION
  const weakAtWorst = lowestV < pullInV * warmCoilFactor(WARM_COIL_C)
  const hot = highestV > coilRatedV * HIGHEST_COIL_FRACTION
  return check(limit, {
    ...base,
    figure: `${volt(loadedV)} loaded, ${volt(lowestV)} with the mains low, up to ${volt(highestV)} at no load with the mains high`,
    verdict: weak || burns ? 'fail' : weakAtWorst || hot ? 'attention' : 'pass',
    reason: weak
      ? 'The relay may not pull in.'
      : burns
        ? 'The coil overheats: fit a regulator, a lower secondary or another coil.'
        : weakAtWorst
          ? 'A warm coil may not pull in when the mains is low.'
          : hot
            ? 'Above the coil’s highest voltage when the supply is lightly loaded.'
            : 'The coil pulls in warm and does not overheat.',
  })
}

function loop({ control, loadedV, lowestV, loaded }: Supply): Check {
  const limit = loaded(
    published('V = V_s R_coil / (R_coil + R_loop), loop twice the one-way length; must operate at 75 % (TE 1308242)', '2003'),
  )
  const { loopLengthM, loopOhmPerKm, coilOhm, coilRatedV } = control
  const base = {
    id: 'control-loop',
    title: 'Control wiring',
    limit: coilRatedV === null ? 'coil voltage not known' : `at least ${volt(coilRatedV * MUST_OPERATE_FRACTION)} at the coil`,
  }
  if (loopLengthM === null || loopOhmPerKm === null || coilOhm === null || coilRatedV === null || loadedV === null || lowestV === null)
    return notKnown(limit, base, 'Enter the coil, the control cable’s one-way length and its Ω/km, one conductor.')
  const loopOhm = 2 * (loopOhmPerKm / 1_000) * loopLengthM
  const atCoilV = coilV({ supplyV: loadedV, coilOhm, loopOhm })
  const weak = atCoilV < coilRatedV * MUST_OPERATE_FRACTION
  const weakAtWorst = coilV({ supplyV: lowestV, coilOhm, loopOhm }) < coilRatedV * MUST_OPERATE_FRACTION * warmCoilFactor(WARM_COIL_C)
  return check(limit, {
    ...base,
    figure: `${volt(atCoilV)} at the coil, ${volt(loadedV - atCoilV)} lost on the way`,
    verdict: weak ? 'fail' : weakAtWorst ? 'attention' : 'pass',
    reason: weak
      ? 'Too little reaches the coil: keep its current local and send only the button over the pair.'
      : weakAtWorst
        ? 'Enough cold; a warm coil may not pull in when the mains is low.'
        : 'Enough reaches the coil.',
  })
}
