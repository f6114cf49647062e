/** What drives the relay's coil: its current, whether it is fully on, and what catches the coil's kick. */
import type { Supply } from './control-case.ts'
import { baseA, forcedGain } from './control-supply.ts'
import { ampere } from './figures.ts'
import type { Limit } from './profiles/profile.ts'
import type { Check } from './types.ts'
import { check, notKnown, published } from './verdict.ts'

/** Driver near its limit (common practice, no source). */
const DRIVER_WARNING_FRACTION = 0.8
/** Data are given at a forced gain of 10; a base resistor of the next E12 value (680 Ω for 12 V and 86 Ω: 10.04) counts as that. */
const PUBLISHED_GAIN = 10.5
/** Up to it a transistor usually saturates, above half its least gain it does not surely: common practice, from memory. */
const USUAL_GAIN = 20
/** TLC555: output tested at 10 mA of source; ICM7555: at 0.8 mA (TI SLFS043C, Intersil p. 8-172). NE555: 200 mA (TI). */
const CMOS_OUTPUT_A = { most: 0.01, everyMaker: 0.0008 } as const
const BIPOLAR_OUTPUT_A = 0.2

export const driverChecks = (supply: Supply): readonly Check[] => [driver(supply), saturation(supply), suppression(supply)]

/** A transistor's highest current as its data sheet gives it: copies of one type differ (2N4401: 500 mA, 600 mA, 1 A; 600 is most makers'). */
function driver({ control, highestV, unloaded }: Supply): Check {
  const limit = unloaded(published('The driver’s published continuous current; warning at 80 %', 'warning: common practice, no source'))
  const base = {
    id: 'driver-current',
    title: 'Driver of the coil',
    limit: control.driver === null ? 'driver not known' : ampere(control.driver.maxCurrentA),
  }
  if (control.driver === null || control.coilOhm === null || highestV === null)
    return notKnown(limit, base, 'Enter the transformer, the transistor’s highest current and the coil’s resistance.')
  const currentA = highestV / control.coilOhm
  const fails = currentA > control.driver.maxCurrentA
  const near = currentA > DRIVER_WARNING_FRACTION * control.driver.maxCurrentA
  return check(limit, {
    ...base,
    figure: `up to ${ampere(currentA)}`,
    verdict: fails ? 'fail' : near ? 'attention' : 'pass',
    reason: fails
      ? 'The coil draws more than the driver carries.'
      : near
        ? 'Within 80 % of what the driver carries at the most: little is left.'
        : 'The driver carries the coil.',
  })
}

function saturation({ control, controller, peakV }: Supply): Check {
  const sheet = published('V_CE(sat) is given at a forced gain of 10 (onsemi 2N4401/D)', '2004')
  const base = { id: 'driver-saturation', title: 'Driver fully on', limit: 'forced gain of 10, as the data are given' }
  const { driver: one, coilOhm } = control
  if (!one || one.baseResistorOhm === null || one.gainMin === null || coilOhm === null || peakV === null)
    return notKnown(sheet, base, 'Enter the transformer, the base resistor, the least gain and the coil’s resistance.')
  const drive = { supplyV: peakV, baseResistorOhm: one.baseResistorOhm }
  const gain = forcedGain({ ...drive, coilOhm })
  const driveA = baseA(drive)
  const cmos = controller.kind === 'one-shot-rc' && controller.icFamily === 'cmos'
  const overdriven = driveA > (cmos ? CMOS_OUTPUT_A.most : BIPOLAR_OUTPUT_A)
  const unsure = !(gain > 0) || gain > one.gainMin / 2
  const timid = cmos && driveA > CMOS_OUTPUT_A.everyMaker
  const limit: Limit =
    gain > PUBLISHED_GAIN && gain <= one.gainMin / 2
      ? { ...sheet, clause: `${sheet.clause}; above it`, edition: 'from memory', confirm: true }
      : sheet
  return check(limit, {
    ...base,
    figure: `forced gain ${gain.toFixed(1)}, least gain ${one.gainMin}, base ${ampere(driveA)}`,
    verdict: unsure || overdriven ? 'fail' : gain > USUAL_GAIN || timid ? 'attention' : 'pass',
    reason: unsure
      ? 'The transistor is not surely fully on: it heats, and the coil gets too little.'
      : overdriven
        ? `The timer’s output does not give this base current${cmos ? ': a CMOS timer wants a Darlington or a logic-level MOSFET' : ''}.`
        : gain > USUAL_GAIN
          ? 'Barely saturated: a smaller base resistor is better.'
          : timid
            ? 'Not every maker’s CMOS timer gives this base current: look at the data sheet of the one that is fitted.'
            : gain > PUBLISHED_GAIN
              ? 'Saturated, though less than its data are given for.'
              : 'Well saturated.',
  })
}

/** Transistor makers ask for a diode, relay makers warn of a plain one (slower break, tack welding): it passes with that note. */
function suppression({ control }: Supply): Check {
  const limit = published('Coil suppression, TE application note 13C3311', 'undated')
  const base = { id: 'suppression', title: 'Coil suppression', limit: 'a suppressor; diode and zener preferred' }
  const quick = 'The driver is protected and the contacts open quickly.'
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
      return check(limit, { ...base, figure: 'diode and zener', verdict: 'pass', reason: quick })
    case 'varistor':
      return check(limit, { ...base, figure: 'varistor', verdict: 'pass', reason: quick })
  }
}
