/** An installation in words, figure by figure, which of them are defaults, and what differs between two revisions. */
import { describeController, formatFarad, formatOhm } from '#lib/core/controller/describe.ts'
import type { CapacitorLeakage, Controller } from '#lib/core/controller/types.ts'
import type { Circuit, Installation, Verdict } from '#lib/core/hardware/types.ts'
import type { LossRating, TankSpec } from '#lib/core/tank/types.ts'
import { DEFAULT_LOSS, DEFAULT_TANK, DEFAULT_TIMER_SUPPLY_V, DEFAULT_TOLERANCE_FRACTION } from './defaults.ts'

export const VERDICT_WORDS: Readonly<Record<Verdict, string>> = {
  pass: 'passes',
  attention: 'attention',
  fail: 'fails',
  'not-known': 'not known',
}

export interface Line {
  readonly label: string
  readonly value: string
  /** The figure is the one that stands where nobody entered any. */
  readonly isDefault: boolean
}

const line = (label: string, value: string, isDefault = false): Line => ({ label, value, isDefault })
const known = (value: number | string | null, unit = ''): string => (value === null ? 'not known' : `${value}${unit}`)
const yes = (value: boolean | null): string => (value === null ? 'not known' : value ? 'yes' : 'no')
const percent = (fraction: number): string => `${Number((fraction * 100).toFixed(2))} %`

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
      return `${loss.lossKwhPerDay} kWh in 24 h at ${loss.testDeltaK} K`
  }
}

export function leakageWords(leakage: CapacitorLeakage): string {
  switch (leakage.kind) {
    case 'resistance':
      return `${formatOhm(leakage.leakageOhm)} measured`
    case 'current':
      return `${Number((leakage.leakageA * 1e6).toPrecision(4))} µA measured`
    case 'series':
      return `limit of its series: ${leakage.series.replace('-', ' ')}, ${leakage.ratedV} V`
    case 'unknown':
      return 'not known'
  }
}

export const describeInstallation = ({ load, controller, circuit }: Installation): readonly Line[] => [
  line('Timed by', describeController(controller)),
  ...controllerLines(controller),
  ...tankLines(load.tank),
  ...circuitLines(circuit),
]

function controllerLines(controller: Controller): readonly Line[] {
  switch (controller.kind) {
    case 'dial':
      return [
        line('Dial scale', `to ${controller.scaleMaxMin} min`),
        line('Tolerance', percent(controller.toleranceFraction), controller.toleranceFraction === DEFAULT_TOLERANCE_FRACTION.dial),
      ]
    case 'one-shot-fixed':
      return [line('Tolerance', percent(controller.toleranceFraction), controller.toleranceFraction === DEFAULT_TOLERANCE_FRACTION.fixed)]
    case 'one-shot-rc': {
      const { resistanceToleranceFraction: resistor, capacitanceToleranceFraction: capacitor } = controller
      return [
        line('Timing resistor', `${formatOhm(controller.resistanceOhm)} ± ${percent(resistor)}`),
        line('Timing capacitor', `${formatFarad(controller.capacitanceF)} ± ${percent(capacitor)}`),
        line('Timer chip', controller.icFamily === 'cmos' ? 'CMOS' : 'bipolar'),
        line('Timer supply', `${controller.supplyV} V`, controller.supplyV === DEFAULT_TIMER_SUPPLY_V),
        line('Capacitor leakage', leakageWords(controller.leakage)),
      ]
    }
    case 'time-switch':
      return [
        line(
          'Its clock',
          controller.driftMin === 0 ? 'right' : `${Math.abs(controller.driftMin)} min ${controller.driftMin > 0 ? 'fast' : 'slow'}`,
        ),
        line('Follows the clock change', controller.followsClockChange ? 'yes' : 'no', !controller.followsClockChange),
        line('Switch step', `${controller.stepMin} min`),
        line('Power reserve', known(controller.powerReserveH, ' h')),
      ]
    case 'supplier-contactor':
      return []
  }
}

function tankLines(tank: TankSpec): readonly Line[] {
  const element = (one: TankSpec['upperElement']) => (one ? `${one.ratedPowerW} W at ${one.ratedVoltageV} V` : 'none')
  return [
    tank.actualVolumeL === null
      ? line('Tank', `${tank.nominalVolumeL} L nominal, 90 % of it taken as water`, true)
      : line('Tank', `${tank.nominalVolumeL} L nominal, ${tank.actualVolumeL} L measured`),
    ...(tank.heightM === null ? [] : [line('Tank height', `${tank.heightM} m`)]),
    line('Upper element', element(tank.upperElement)),
    line('Lower element', element(tank.lowerElement)),
    ...(tank.upperElement
      ? [
          line(
            'Above the upper element',
            percent(tank.shareAboveUpperFraction),
            Math.abs(tank.shareAboveUpperFraction - DEFAULT_TANK.shareAboveUpperFraction) < 1e-6,
          ),
        ]
      : []),
    line('Set point', `${tank.setPointC} °C`, tank.setPointC === DEFAULT_TANK.setPointC),
    line('Dead band', `${tank.deadBandK} K`, tank.deadBandK === DEFAULT_TANK.deadBandK),
    line('Air around the tank', `${tank.ambientC} °C`, tank.ambientC === DEFAULT_TANK.ambientC),
    line('Mixing valve', tank.mixingValveC === null ? 'none' : `${tank.mixingValveC} °C`),
    line('Standing loss', lossWords(tank.loss), lossWords(tank.loss) === lossWords(DEFAULT_LOSS)),
  ]
}

function circuitLines(circuit: Circuit): readonly Line[] {
  const { conductor, contactRatingA, contactRatingClass } = circuit
  return [
    line('Supply', `${circuit.supplyVoltageV} V`),
    line('Breaker', known(circuit.breakerA, ' A')),
    line(
      'Conductor',
      conductor
        ? `${conductor.size} ${conductor.system === 'mm2' ? 'mm²' : 'AWG'} ${conductor.material}, ${conductor.ratingC} °C`
        : 'not known',
    ),
    line('Cable length', known(circuit.lengthM, ' m')),
    line('Air around the cable', known(circuit.ambientC, ' °C')),
    line('Conductors grouped', known(circuit.groupedConductors)),
    line('Contact', contactRatingA === null ? 'not known' : `${contactRatingA} A ${contactRatingClass ?? 'of a class not known'}`),
    line('Poles switched', known(circuit.polesSwitched)),
    line('Isolator in sight', yes(circuit.isolatorInSight)),
    line('Relief valve', yes(circuit.reliefValve)),
    line('Closed system', yes(circuit.closedSystem)),
    line('Expansion vessel', yes(circuit.expansionVessel)),
    line('Low voltage apart from mains', yes(circuit.extraLowVoltageSeparated)),
    ...laterLines(circuit),
    ...controlLines(circuit.control),
  ]
}

/** Fields younger than the first revisions: a line only where somebody recorded them. */
function laterLines({ markedMaxBreakerA, terminalRatingC, inThermalInsulation, mainsRangeV }: Circuit): readonly Line[] {
  return [
    ...(markedMaxBreakerA ? [line('Largest device on the nameplate', `${markedMaxBreakerA} A`)] : []),
    ...(terminalRatingC ? [line('Terminals rated for', `${terminalRatingC} °C`)] : []),
    ...(inThermalInsulation === undefined || inThermalInsulation === null
      ? []
      : [line('Cable in thermal insulation', yes(inThermalInsulation))]),
    ...(mainsRangeV ? [line('Mains as read', `${mainsRangeV.lowestV} to ${mainsRangeV.highestV} V`)] : []),
  ]
}

function controlLines(control: Circuit['control']): readonly Line[] {
  if (!control) return []
  const { driver } = control
  return [
    line('Transformer', `${known(control.transformerSecondaryV, ' V')}, ${known(control.transformerVa, ' VA')}`),
    line(
      'Transformer regulation',
      control.transformerRegulationFraction === null ? 'not known' : percent(control.transformerRegulationFraction),
    ),
    line(
      'Reservoir',
      `${control.reservoirF === null ? 'not known' : formatFarad(control.reservoirF)}, ${known(control.reservoirRatedV, ' V')}`,
    ),
    line('Coil', `${known(control.coilRatedV, ' V')}, ${known(control.coilOhm, ' Ω')}`),
    line(
      'Driver',
      driver ? `${driver.maxCurrentA} A, base ${known(driver.baseResistorOhm, ' Ω')}, gain ${known(driver.gainMin)}` : 'not known',
    ),
    line('Suppression', known(control.suppression)),
    line('Primary fuse', known(control.primaryFuseA, ' A')),
    line('Control loop', `${known(control.loopLengthM, ' m')}, ${known(control.loopOhmPerKm, ' Ω/km')}`),
  ]
}

/** Lines that changed from the revision before; `null` before means the first record. */
export function differences(before: Installation | null, after: Installation): readonly string[] {
  if (!before) return ['First record']
  const [old, now] = [new Map(valuesOf(before)), new Map(valuesOf(after))]
  return [...new Set([...now.keys(), ...old.keys()])].flatMap((label) => {
    const [from, to] = [old.get(label), now.get(label)]
    return from === to ? [] : [`${label}: ${from ?? 'nothing'} → ${to ?? 'nothing'}`]
  })
}
const valuesOf = (installation: Installation) => describeInstallation(installation).map(({ label, value }) => [label, value] as const)
