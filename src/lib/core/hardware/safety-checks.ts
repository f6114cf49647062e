/** The checks that are answered by looking: isolator, relief valve, mixing valve, expansion, separation of low voltage. */
import { SCALD_LIMIT_C } from '../hygiene/scald.ts'
import { actualVolumeL } from '../tank/model.ts'
import { expansionL } from '../tank/water.ts'
import type { Limit, RuleProfile } from './profiles/profile.ts'
import { positive } from './recorded.ts'
import type { Check, Installation } from './types.ts'
import { check, notKnown, published } from './verdict.ts'

/** What a tank is filled with, for saying how much it grows. */
const COLD_C = 15
const VALVE_CAUTION = 'Never bypass a thermostat, high-limit or relief valve.'

interface Seen {
  readonly id: string
  readonly title: string
  readonly seen: boolean | null
  readonly limit: string
  readonly missing: string
  readonly caution?: string
}

/** Yes passes, no fails, not looked is not known. */
function look(rule: Limit, { seen, missing, ...base }: Seen): Check {
  if (seen === null) return notKnown(rule, base, 'Nobody has recorded it: look and enter it.')
  return check(rule, {
    ...base,
    verdict: seen ? 'pass' : 'fail',
    figure: seen ? 'present' : 'missing',
    reason: seen ? 'Recorded as present.' : missing,
  })
}

export const safetyChecks = (installation: Installation, profile: RuleProfile): readonly Check[] => [
  look(profile.isolator, {
    id: 'isolator',
    title: 'Isolator in sight',
    seen: installation.circuit.isolatorInSight,
    limit: 'in sight or lockable',
    missing: 'Nobody can make it safe to work on: fit an isolator in sight.',
    caution: 'A timer or time switch is no isolator: it can switch on by itself. Isolate, lock off and prove dead.',
  }),
  look(profile.reliefValve, {
    id: 'relief-valve',
    title: 'Temperature and pressure relief valve',
    seen: installation.circuit.reliefValve,
    limit: 'fitted',
    missing: 'A tank without a relief valve can burst. Switch it off until one is fitted.',
    caution: VALVE_CAUTION,
  }),
  look(profile.separation, {
    id: 'separation',
    title: 'Extra-low voltage apart from mains',
    seen: installation.circuit.extraLowVoltageSeparated,
    limit: 'own cable and compartment, or the permitted barrier',
    missing: 'Mains can reach the button a tenant touches. Isolate and separate the wiring.',
  }),
  mixingValve(installation),
  expansion(installation),
]

/** A valve that lets more than the limit through protects nobody: what reaches the tap decides. */
function mixingValve({ load }: Installation): Check {
  const setPointC = positive(load.tank.setPointC)
  const mixedC = positive(load.tank.mixingValveC)
  const limit = published('Third-degree burn in 5 min at 49 °C, 6 s at 60 °C', 'CPSC 5098')
  const base = {
    id: 'mixing-valve',
    title: 'Mixing valve',
    limit: `at most ${SCALD_LIMIT_C} °C at the tap`,
    caution: 'Do not lower the set point below 60 °C to avoid scald without asking who is responsible for Legionella.',
  }
  if (setPointC === null) return notKnown(limit, base, 'Read the set point on the thermostat and enter it.')
  const safe = Math.min(setPointC, mixedC ?? setPointC) <= SCALD_LIMIT_C
  return check(limit, {
    ...base,
    verdict: safe ? 'pass' : 'attention',
    figure: mixedC === null ? `set point ${setPointC} °C, no mixing valve` : `set point ${setPointC} °C, mixed to ${mixedC} °C`,
    reason: safe ? 'Water at the tap is limited.' : 'Water this hot scalds: fit a mixing valve, or set the one that is fitted lower.',
  })
}

function expansion({ load, circuit }: Installation): Check {
  const limit = published('Density of water (Kell 1975, checked against IAPWS-95)', 'vessel: common practice, no source')
  const base = { id: 'expansion', title: 'Expansion vessel', limit: 'fitted in a closed system', caution: VALVE_CAUTION }
  if (circuit.closedSystem === null)
    return notKnown(limit, base, 'Nobody has recorded whether a check valve or pressure reducer closes the system: look and enter it.')
  if (!circuit.closedSystem)
    return check(limit, {
      ...base,
      verdict: 'pass',
      figure: 'open system',
      reason: 'The water can grow back into the main: no vessel is needed.',
    })
  const setPointC = positive(load.tank.setPointC)
  const grown = setPointC === null ? 'water' : `${expansionL(actualVolumeL(load.tank), { fromC: COLD_C, toC: setPointC }).toFixed(1)} L`
  return look(limit, {
    ...base,
    seen: circuit.expansionVessel,
    missing: `Each heating from ${COLD_C} °C pushes ${grown} out: fit an expansion vessel. A dripping relief valve is not the timer’s fault.`,
  })
}
