/** The checks that are answered by looking: isolator, relief valve, mixing valve, expansion, separation of low voltage. */
import { actualVolumeL } from '../tank/model.ts'
import { expansionL } from '../tank/water.ts'
import type { RuleProfile } from './profiles/profile.ts'
import type { Check, Installation } from './types.ts'
import { check } from './verdict.ts'

/** CPSC and DOE advise 120 °F at the tap; above it a mixing valve is called for. */
const SCALD_SET_POINT_C = 49
/** What a tank is filled with, for saying how much it grows. */
const COLD_C = 15
const VALVE_CAUTION = 'Never bypass a thermostat, high-limit or relief valve.'

interface Seen {
  readonly id: string
  readonly title: string
  readonly seen: boolean | null
  readonly limit: string
  readonly clause: string
  readonly confirm: boolean
  readonly missing: string
  readonly caution?: string
}

/** Yes passes, no fails, not looked is not known. */
const look = ({ id, title, seen, limit, clause, confirm, missing, caution }: Seen): Check =>
  check(
    { clause, confirm },
    {
      id,
      title,
      verdict: seen === null ? 'not-known' : seen ? 'pass' : 'fail',
      figure: seen === null ? 'not known' : seen ? 'present' : 'missing',
      limit,
      reason: seen === null ? 'Nobody has recorded it: look and enter it.' : seen ? 'Recorded as present.' : missing,
      ...(caution ? { caution } : {}),
    },
  )

export function safetyChecks({ load, circuit }: Installation, profile: RuleProfile): readonly Check[] {
  const { setPointC, mixingValveC } = load.tank
  return [
    look({
      id: 'isolator',
      title: 'Isolator in sight',
      seen: circuit.isolatorInSight,
      limit: 'in sight or lockable',
      ...profile.isolator,
      missing: 'Nobody can make it safe to work on: fit an isolator in sight.',
    }),
    look({
      id: 'relief-valve',
      title: 'Temperature and pressure relief valve',
      seen: circuit.reliefValve,
      limit: 'fitted',
      clause: 'NEC 422.47 marking; IEC 60335-2-21 clause 22',
      confirm: false,
      missing: 'A tank without a relief valve can burst. Switch it off until one is fitted.',
      caution: VALVE_CAUTION,
    }),
    look({
      id: 'separation',
      title: 'Extra-low voltage apart from mains',
      seen: circuit.extraLowVoltageSeparated,
      limit: 'own cable and compartment, or the permitted barrier',
      clause: 'NEC 725.136; IEC 60364-4-41 clause 414 (read in secondary copies)',
      confirm: false,
      missing: 'Mains can reach the button a tenant touches. Isolate and separate the wiring.',
    }),
    check(
      { clause: 'CPSC: third-degree burn in 5 min at 49 °C, 6 s at 60 °C', confirm: false },
      {
        id: 'mixing-valve',
        title: 'Mixing valve',
        verdict: setPointC <= SCALD_SET_POINT_C || mixingValveC !== null ? 'pass' : 'attention',
        figure:
          mixingValveC === null ? `set point ${setPointC} °C, no mixing valve` : `set point ${setPointC} °C, mixed to ${mixingValveC} °C`,
        limit: `a valve above ${SCALD_SET_POINT_C} °C`,
        reason:
          setPointC <= SCALD_SET_POINT_C || mixingValveC !== null
            ? 'Water at the tap is limited.'
            : 'Water this hot scalds within seconds: fit a mixing valve.',
        caution: 'Do not lower the set point below 60 °C to avoid scald without asking who is responsible for Legionella.',
      },
    ),
    ...(circuit.closedSystem
      ? [
          look({
            id: 'expansion',
            title: 'Expansion vessel',
            seen: circuit.expansionVessel,
            limit: 'fitted in a closed system',
            clause: 'Density of water (Kell 1975, checked against IAPWS-95); common practice, no source',
            confirm: false,
            missing: `Each heating from ${COLD_C} °C pushes ${expansionL(actualVolumeL(load.tank), { fromC: COLD_C, toC: setPointC }).toFixed(1)} L out: fit an expansion vessel.`,
            caution: VALVE_CAUTION,
          }),
        ]
      : []),
  ]
}
