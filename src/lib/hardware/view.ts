/** An installation in words, and what differs between two revisions. */
import { describeController } from '#lib/core/controller/describe.ts'
import type { Circuit, Installation, Verdict } from '#lib/core/hardware/types.ts'
import type { LossRating } from '#lib/core/tank/types.ts'

export const VERDICT_WORDS: Readonly<Record<Verdict, string>> = {
  pass: 'passes',
  attention: 'attention',
  fail: 'fails',
  'not-known': 'not known',
}

const known = (value: number | string | null, unit = ''): string => (value === null ? 'not known' : `${value}${unit}`)
const yes = (value: boolean | null): string => (value === null ? 'not known' : value ? 'yes' : 'no')

export function lossWords(loss: LossRating): string {
  switch (loss.kind) {
    case 'ua':
      return `${loss.lossWPerK} W/K`
    case 'uef':
      return `UEF ${loss.uef}, ${loss.drawPattern} draw pattern`
    case 'ef':
      return `EF ${loss.ef}`
    case 'class':
      return `class ${loss.label}`
    case 'kwh-per-day':
      return `${loss.lossKwhPerDay} kWh in 24 h`
  }
}

export type Line = readonly [label: string, value: string]

export function describeInstallation({ load, controller, circuit }: Installation): readonly Line[] {
  const { tank } = load
  const element = (one: typeof tank.upperElement) => (one ? `${one.ratedPowerW} W at ${one.ratedVoltageV} V` : 'none')
  return [
    ['Timed by', describeController(controller)],
    [
      'Tank',
      tank.actualVolumeL === null ? `${tank.nominalVolumeL} L nominal, 90 % of it taken as actual` : `${tank.actualVolumeL} L measured`,
    ],
    ['Upper element', element(tank.upperElement)],
    ['Lower element', element(tank.lowerElement)],
    ['Set point', `${tank.setPointC} °C, dead band ${tank.deadBandK} K`],
    ['Mixing valve', tank.mixingValveC === null ? 'none' : `${tank.mixingValveC} °C`],
    ['Standing loss', lossWords(tank.loss)],
    ...circuitLines(circuit),
  ]
}

const circuitLines = (circuit: Circuit): readonly Line[] => [
  ['Supply', `${circuit.supplyVoltageV} V`],
  ['Breaker', known(circuit.breakerA, ' A')],
  [
    'Conductor',
    circuit.conductor
      ? `${circuit.conductor.size} ${circuit.conductor.system} ${circuit.conductor.material}, ${circuit.conductor.ratingC} °C`
      : 'not known',
  ],
  ['Cable length', known(circuit.lengthM, ' m')],
  ['Contact', circuit.contactRatingA === null ? 'not known' : `${circuit.contactRatingA} A ${circuit.contactRatingClass ?? ''}`],
  ['Poles switched', known(circuit.polesSwitched)],
  ['Isolator in sight', yes(circuit.isolatorInSight)],
  ['Relief valve', yes(circuit.reliefValve)],
]

/** Lines that changed from the revision before; `null` before means the first record. */
export function differences(before: Installation | null, after: Installation): readonly string[] {
  if (!before) return ['First record']
  const old = new Map(describeInstallation(before))
  return describeInstallation(after).flatMap(([label, value]) =>
    old.get(label) === value ? [] : [`${label}: ${old.get(label) ?? 'nothing'} → ${value}`],
  )
}
