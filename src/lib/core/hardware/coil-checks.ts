/** The relay's coil, what drives it and what leads to it. */
import { known, notKnown, type Supply } from './control-case.ts'
import { coilV, forcedGain, rectifiedPeakV, warmCoilFactor } from './control-supply.ts'
import { ampere, volt } from './figures.ts'
import type { Check } from './types.ts'
import { check } from './verdict.ts'

/** A power relay's published must-operate voltage: 75 % of its coil's (TE/P&B catalogue 1308242). */
const MUST_OPERATE_FRACTION = 0.75
/** A coil that has worked for long in a warm box (derived in published relay data: about 65 °C). */
const WARM_COIL_C = 65
/** A definite-purpose contactor's published highest coil voltage: 15 V of 12 (TE P30/P40). */
const HIGHEST_COIL_FRACTION = 1.25
/** Above it a published 86 Ω relay coil passes its 140 °C in air of 25 °C. */
const BURNING_COIL_FRACTION = 1.65
/** Driver near its limit (common practice, no source). */
const DRIVER_WARNING_FRACTION = 0.8

export const coilChecks = (supply: Supply): readonly Check[] => [
  coil(supply),
  loop(supply),
  driver(supply),
  saturation(supply),
  suppression(supply),
]

function coil({ control, highestV, loadedV }: Supply): Check {
  const limit = known('Relay data: must operate at 75 % of coil voltage (TE 1308242), highest 125 % (TE P30/P40)')
  const { coilRatedV } = control
  const base = {
    id: 'coil-voltage',
    title: 'Coil on this supply',
    limit:
      coilRatedV === null
        ? 'coil voltage not known'
        : `${volt(coilRatedV * MUST_OPERATE_FRACTION)} to ${volt(coilRatedV * HIGHEST_COIL_FRACTION)}`,
  }
  if (coilRatedV === null || loadedV === null)
    return notKnown(limit, base, 'Enter the coil’s voltage and resistance and the reservoir capacitor.')
  const weak = loadedV < coilRatedV * MUST_OPERATE_FRACTION
  const weakWhenWarm = loadedV < coilRatedV * MUST_OPERATE_FRACTION * warmCoilFactor(WARM_COIL_C)
  const burns = highestV > coilRatedV * BURNING_COIL_FRACTION
  const hot = highestV > coilRatedV * HIGHEST_COIL_FRACTION
  return check(limit, {
    ...base,
    figure: `${volt(loadedV)} loaded, up to ${volt(highestV)} at no load with the mains high`,
    verdict: weak || burns ? 'fail' : weakWhenWarm || hot ? 'attention' : 'pass',
    reason: weak
      ? 'The relay may not pull in.'
      : burns
        ? 'The coil overheats: fit a regulator, a lower secondary or another coil.'
        : weakWhenWarm
          ? 'A warm coil may not pull in.'
          : hot
            ? 'Above the coil’s highest voltage when the supply is lightly loaded.'
            : 'The coil pulls in warm and does not overheat.',
  })
}

function loop({ control, loadedV }: Supply): Check {
  const limit = known('V = V_s R_coil / (R_coil + R_loop), loop twice the one-way length; must operate at 75 % (TE 1308242)')
  const { loopLengthM, loopOhmPerKm, coilOhm, coilRatedV } = control
  const base = {
    id: 'control-loop',
    title: 'Control wiring',
    limit: coilRatedV === null ? 'coil voltage not known' : `at least ${volt(coilRatedV * MUST_OPERATE_FRACTION)} at the coil`,
  }
  if (loopLengthM === null || loopOhmPerKm === null || coilOhm === null || coilRatedV === null || loadedV === null)
    return notKnown(limit, base, 'Enter the control cable’s one-way length and its Ω/km, one conductor.')
  const atCoilV = coilV({ supplyV: loadedV, coilOhm, loopOhm: 2 * (loopOhmPerKm / 1_000) * loopLengthM })
  const weak = atCoilV < coilRatedV * MUST_OPERATE_FRACTION
  const weakWhenWarm = atCoilV < coilRatedV * MUST_OPERATE_FRACTION * warmCoilFactor(WARM_COIL_C)
  return check(limit, {
    ...base,
    figure: `${volt(atCoilV)} at the coil`,
    verdict: weak ? 'fail' : weakWhenWarm ? 'attention' : 'pass',
    reason: weak
      ? 'Too much is lost on the way: keep the coil’s current local and send only the button over the pair.'
      : weakWhenWarm
        ? 'Enough cold; a warm coil may not pull in.'
        : 'Enough reaches the coil.',
  })
}

function driver({ control, highestV }: Supply): Check {
  const limit = known('The driver’s published continuous current; 80 % warning is common practice, no source')
  const base = {
    id: 'driver-current',
    title: 'Driver of the coil',
    limit: control.driver === null ? 'not known' : ampere(control.driver.maxCurrentA),
  }
  if (control.driver === null || control.coilOhm === null)
    return notKnown(limit, base, 'Enter the transistor’s highest current and the coil’s resistance.')
  const currentA = highestV / control.coilOhm
  const fails = currentA > control.driver.maxCurrentA
  return check(limit, {
    ...base,
    figure: `up to ${ampere(currentA)}`,
    verdict: fails ? 'fail' : currentA > DRIVER_WARNING_FRACTION * control.driver.maxCurrentA ? 'attention' : 'pass',
    reason: fails ? 'The coil draws more than the driver carries.' : 'The driver carries the coil.',
  })
}

/** Forced gain against the driver's least: up to 10 saturates, half the least gain no longer surely does (common practice, no source). */
function saturation({ control }: Supply): Check {
  const limit = known('V_CE(sat) is published at a forced gain of 10 (onsemi 2N4401/D); other bounds are common practice, no source')
  const base = { id: 'driver-saturation', title: 'Driver fully on', limit: 'forced gain at most 20' }
  const { driver: one, coilOhm, transformerSecondaryV } = control
  if (!one || one.baseResistorOhm === null || one.gainMin === null || coilOhm === null)
    return notKnown(limit, base, 'Enter the base resistor, the least gain and the coil’s resistance.')
  const gain = forcedGain({ supplyV: rectifiedPeakV(transformerSecondaryV), coilOhm, baseResistorOhm: one.baseResistorOhm })
  const fails = gain > one.gainMin / 2
  return check(limit, {
    ...base,
    figure: `forced gain ${gain.toFixed(1)}, least gain ${one.gainMin}`,
    verdict: fails ? 'fail' : gain > 20 ? 'attention' : 'pass',
    reason: fails
      ? 'The transistor is not surely fully on: it heats, and the coil gets too little.'
      : gain > 20
        ? 'Barely saturated: a smaller base resistor is better.'
        : gain > 10
          ? 'Saturated, though less than its data are given for.'
          : 'Well saturated.',
  })
}

function suppression({ control }: Supply): Check {
  const limit = known('Coil suppression: TE application note 13C3311')
  const base = { id: 'suppression', title: 'Coil suppression', limit: 'a suppressor; diode and zener preferred' }
  switch (control.suppression) {
    case null:
      return notKnown(limit, base, 'Look for a diode or varistor across the coil.')
    case 'none':
      return check(limit, {
        ...base,
        figure: 'none',
        verdict: 'fail',
        reason: 'The coil’s kick of a thousand volts destroys the driver, and the relay may then stay on.',
      })
    case 'diode':
      return check(limit, {
        ...base,
        figure: 'plain diode',
        verdict: 'pass',
        reason: 'The driver is protected; contacts open more slowly and can tack. A zener in series is better.',
      })
    case 'diode-zener':
      return check(limit, {
        ...base,
        figure: 'diode and zener',
        verdict: 'pass',
        reason: 'The driver is protected and the contacts open quickly.',
      })
    case 'varistor':
      return check(limit, {
        ...base,
        figure: 'varistor',
        verdict: 'pass',
        reason: 'The driver is protected and the contacts open quickly.',
      })
  }
}
