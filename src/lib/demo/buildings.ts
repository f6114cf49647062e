/** The demo's three invented buildings: who lives where, when they shower, what times their heater, and what is wrong on purpose. */
import type { Controller } from '#lib/core/controller/types.ts'
import type { Installation, ProfileId } from '#lib/core/hardware/types.ts'
import type { InletClimate } from '#lib/core/tank/types.ts'
import type { Week } from '#lib/preference/week.ts'
import { american, british, daily, dial, fixed, ONE_SHOT_THAT_MAY_NEVER_STOP, oneShot, timeSwitch } from './installations.ts'
import { PORT_ALDANE_RATE, WEXHOLT_RATE } from './rates.ts'
import { at, shower, week } from './weeks.ts'

export interface DemoUnit {
  readonly code: string
  readonly floor: number
  readonly stack: string
  readonly installation: Installation
  /** `null`: nobody lives there now. */
  readonly week: Week | null
}

export interface DemoBuilding {
  readonly slug: string
  readonly name: string
  readonly address: string
  readonly zone: string
  readonly country: 'US' | 'GB'
  readonly currency: 'USD' | 'GBP'
  readonly ruleProfile: ProfileId
  readonly supplyVoltageV: number
  readonly phases: 1 | 3
  readonly serviceRatingA: number
  readonly baseLoadW: number
  readonly climate: InletClimate
  readonly rate: { readonly name: string; readonly record: object }
  readonly units: readonly DemoUnit[]
}

const STACKS = ['A', 'B', 'C', 'D', 'E', 'F'] as const

/** Eight flats on one small service; on Friday evenings everybody wants the same hour. */
const SALLOW_READY_BY = [at(6, 15), at(6, 45), at(7), at(7, 30), at(8), at(6, 30), at(7, 15), at(8, 30)]
const sallowController = (index: number): Controller =>
  (
    [
      dial(90),
      dial(120),
      timeSwitch([daily(at(4, 30), at(7)), daily(at(17), at(19))]),
      fixed(120),
      dial(35),
      oneShot(10, 680),
      dial(120),
      fixed(90),
    ] as const
  )[index] ?? dial(90)

const sallowUnits = SALLOW_READY_BY.map((readyBy, index): DemoUnit => ({
  code: `Flat ${index + 1}`,
  floor: Math.floor(index / 2),
  stack: STACKS[index % 2] ?? 'A',
  installation: british(sallowController(index), index % 3 === 0 ? 150 : 120),
  week: week({ weekdays: [shower(readyBy)], weekend: [shower(readyBy + 90)], friday: [shower(at(19))] }),
}))

/** 24 units; a letter is a stack. Most are well; the exceptions are named below. */
const CINDER_EXCEPTIONS: Readonly<Record<string, Installation>> = {
  // Cold: a 30-minute run on a 208 V supply.
  '5C': american({ controller: dial(30), large: true }),
  // Cold in winter.
  '2A': american({ controller: oneShot(6.8, 330), large: false }),
  // Its clock has drifted.
  '1D': american({ controller: timeSwitch([daily(at(5), at(7, 30))], 55), large: false }),
  // Dangerous: may never stop.
  '4B': american({ controller: ONE_SHOT_THAT_MAY_NEVER_STOP, large: false }),
  // The wrong breaker: 20 A on a continuous load that needs 25 A.
  '3D': american({
    controller: dial(120),
    large: true,
    circuit: { breakerA: 20, conductor: { size: '12', system: 'awg', material: 'copper', ratingC: 60 } },
  }),
  // Hot without a mixing valve.
  '6B': american({ controller: fixed(120), large: false, mixingValveC: null }),
}
const cinderController = (index: number): Controller =>
  ([dial(120), fixed(120), oneShot(10, 680), dial(105), timeSwitch([daily(at(4, 30), at(7))])] as const)[index % 5] ?? dial(120)

const cinderUnits = Array.from({ length: 24 }, (_, index): DemoUnit => {
  const floor = Math.floor(index / 4) + 1
  const stack = STACKS[index % 4] ?? 'A'
  const code = `${floor}${stack}`
  const readyBy = at(6, 30) + ((index * 25) % 150)
  const two = index % 4 === 0 || code === '5C'
  return {
    code,
    floor,
    stack,
    installation: CINDER_EXCEPTIONS[code] ?? american({ controller: cinderController(index), large: index % 3 === 0 }),
    week:
      code === '6D'
        ? null
        : week({ weekdays: [shower(code === '5C' ? at(6, 45) : readyBy, two ? 2 : 1)], weekend: [shower(readyBy + 75, two ? 2 : 1)] }),
  }
})

/** 60 units on ten floors; every seventh has an evening shower as well. */
const kestrelController = (index: number): Controller => {
  if (index % 23 === 11) return dial(25)
  return (
    ([dial(105), dial(120), fixed(120), timeSwitch([daily(at(4, 15), at(6, 45)), daily(at(18), at(19, 30))])] as const)[index % 4] ??
    dial(120)
  )
}
const kestrelUnits = Array.from({ length: 60 }, (_, index): DemoUnit => {
  const floor = Math.floor(index / 6) + 1
  const stack = STACKS[index % 6] ?? 'A'
  const readyBy = at(6) + ((index * 35) % 180)
  const evening = index % 7 === 3 ? [shower(at(20, 30))] : []
  return {
    code: `${floor}${stack}`,
    floor,
    stack,
    installation: american({ controller: kestrelController(index), large: index % 2 === 0 }),
    week: index === 41 ? null : week({ weekdays: [shower(readyBy), ...evening], weekend: [shower(readyBy + 60), ...evening] }),
  }
})

export const DEMO_BUILDINGS: readonly DemoBuilding[] = [
  {
    slug: 'sallow-court',
    name: 'Sallow Court',
    address: '3 Osier Lane, Wexholt',
    zone: 'Europe/London',
    country: 'GB',
    currency: 'GBP',
    ruleProfile: 'gb-bs7671',
    supplyVoltageV: 230,
    phases: 1,
    serviceRatingA: 100,
    baseLoadW: 2_200,
    climate: { kind: 'climate', meanAirC: 10.4, swingAirK: 13, hemisphere: 'north' },
    rate: { name: 'Wexholt three-rate', record: WEXHOLT_RATE },
    units: sallowUnits,
  },
  {
    slug: 'cinder-wharf',
    name: 'Cinder Wharf',
    address: '41 Tallow Street, Port Aldane',
    zone: 'America/Los_Angeles',
    country: 'US',
    currency: 'USD',
    ruleProfile: 'us-nec-2023',
    supplyVoltageV: 208,
    phases: 3,
    serviceRatingA: 400,
    baseLoadW: 9_500,
    climate: { kind: 'climate', meanAirC: 13.2, swingAirK: 14, hemisphere: 'north' },
    rate: { name: 'Port Aldane GS-2', record: PORT_ALDANE_RATE },
    units: cinderUnits,
  },
  {
    slug: 'kestrel-rise',
    name: 'Kestrel Rise',
    address: '7 Breakwater Road, Port Aldane',
    zone: 'America/Los_Angeles',
    country: 'US',
    currency: 'USD',
    ruleProfile: 'us-nec-2023',
    supplyVoltageV: 208,
    phases: 3,
    serviceRatingA: 800,
    baseLoadW: 24_000,
    climate: { kind: 'climate', meanAirC: 13.2, swingAirK: 14, hemisphere: 'north' },
    rate: { name: 'Port Aldane GS-2 (Kestrel Rise)', record: PORT_ALDANE_RATE },
    units: kestrelUnits,
  },
]
