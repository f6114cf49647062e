/** What may be entered about an installation: one schema for forms, roster and API; limits as constants. Shared with the browser. */
import { z } from 'zod'
import type { Controller } from '#lib/core/controller/types.ts'
import type { Circuit, Installation } from '#lib/core/hardware/types.ts'
import type { TankSpec } from '#lib/core/tank/types.ts'

export const TANK_VOLUME_L = { min: 5, max: 2_000 } as const
export const ELEMENT_POWER_W = { min: 200, max: 36_000 } as const
export const SUPPLY_V = { min: 100, max: 480 } as const
export const SET_POINT_C = { min: 30, max: 90 } as const
export const RUN_MIN = { min: 1, max: 1_440 } as const

const between = (name: string, { min, max }: { readonly min: number; readonly max: number }, unit: string) =>
  z
    .number({ error: `${name} must be a number in ${unit}.` })
    .min(min, `${name} is below ${min} ${unit}. Check the unit and the figure.`)
    .max(max, `${name} is above ${max} ${unit}. Check the unit and the figure.`)
const fraction = (name: string) => between(name, { min: 0, max: 1 }, '(0 to 1)')

const element = z.strictObject({
  ratedPowerW: between('Element power', ELEMENT_POWER_W, 'W'),
  ratedVoltageV: between('Element voltage', SUPPLY_V, 'V'),
})

const loss = z.discriminatedUnion('kind', [
  z.strictObject({ kind: z.literal('ua'), lossWPerK: between('Loss', { min: 0.1, max: 20 }, 'W/K') }),
  z.strictObject({
    kind: z.literal('uef'),
    uef: between('UEF', { min: 0.5, max: 1 }, ''),
    drawPattern: z.enum(['very-small', 'low', 'medium', 'high']),
  }),
  z.strictObject({ kind: z.literal('ef'), ef: between('EF', { min: 0.5, max: 1 }, '') }),
  z.strictObject({
    kind: z.literal('kwh-per-day'),
    lossKwhPerDay: between('Standing loss', { min: 0.1, max: 20 }, 'kWh/24 h'),
    testDeltaK: between('Test difference', { min: 10, max: 70 }, 'K'),
  }),
  z.strictObject({ kind: z.literal('class'), label: z.enum(['A+', 'A', 'B', 'C', 'D', 'E', 'F']) }),
])

export const tankSchema = z
  .strictObject({
    nominalVolumeL: between('Tank volume', TANK_VOLUME_L, 'litres'),
    actualVolumeL: between('Measured volume', TANK_VOLUME_L, 'litres').nullable(),
    heightM: between('Tank height', { min: 0.2, max: 4 }, 'm').nullable(),
    loss,
    upperElement: element.nullable(),
    lowerElement: element.nullable(),
    shareAboveUpperFraction: fraction('Share above the upper element'),
    setPointC: between('Set point', SET_POINT_C, '°C'),
    deadBandK: between('Dead band', { min: 0.5, max: 25 }, 'K'),
    ambientC: between('Ambient temperature', { min: -20, max: 50 }, '°C'),
    mixingValveC: between('Mixing valve', { min: 30, max: 65 }, '°C').nullable(),
  })
  .refine((tank) => tank.upperElement !== null || tank.lowerElement !== null, {
    error: 'A tank needs at least one element. Enter the one that is fitted.',
    path: ['lowerElement'],
  }) satisfies z.ZodType<TankSpec>

const leakage = z.discriminatedUnion('kind', [
  z.strictObject({ kind: z.literal('resistance'), leakageOhm: z.number().positive('Leakage resistance must be above 0 Ω.') }),
  z.strictObject({ kind: z.literal('current'), leakageA: z.number().nonnegative('Leakage current must not be below 0 A.') }),
  z.strictObject({
    kind: z.literal('series'),
    series: z.enum(['electrolytic', 'low-leakage', 'film-polypropylene', 'film-polyester']),
    ratedV: between('Capacitor voltage', { min: 2, max: 630 }, 'V'),
  }),
  z.strictObject({ kind: z.literal('unknown') }),
])

export const switchStepSchema = z
  .strictObject({
    weekday: z.union([z.literal(0), z.literal(1), z.literal(2), z.literal(3), z.literal(4), z.literal(5), z.literal(6)]).nullable(),
    onMin: z.number().int().min(0).max(1_439, 'A step starts within its day.'),
    offMin: z.number().int().min(1).max(2_880, 'A step ends before the end of the next day.'),
  })
  .refine((step) => step.offMin > step.onMin, {
    error: 'A step must end after it starts. For a step over midnight enter the end as the next day.',
    path: ['offMin'],
  })

export const controllerSchema = z.discriminatedUnion('kind', [
  z.strictObject({
    kind: z.literal('one-shot-rc'),
    resistanceOhm: between('Timing resistor', { min: 1e3, max: 1e9 }, 'Ω'),
    resistanceToleranceFraction: fraction('Resistor tolerance'),
    capacitanceF: between('Timing capacitor', { min: 1e-9, max: 1 }, 'F'),
    capacitanceToleranceFraction: fraction('Capacitor tolerance'),
    supplyV: between('Timer supply', { min: 2, max: 18 }, 'V'),
    icFamily: z.enum(['bipolar', 'cmos']),
    leakage,
  }),
  z.strictObject({
    kind: z.literal('one-shot-fixed'),
    settingMin: between('Run', RUN_MIN, 'minutes'),
    toleranceFraction: fraction('Tolerance'),
  }),
  z.strictObject({
    kind: z.literal('dial'),
    settingMin: between('Dial setting', RUN_MIN, 'minutes'),
    scaleMaxMin: between('Dial scale', RUN_MIN, 'minutes'),
    toleranceFraction: fraction('Tolerance'),
  }),
  z.strictObject({
    kind: z.literal('time-switch'),
    stepMin: between('Switch step', { min: 1, max: 120 }, 'minutes'),
    programme: z.array(switchStepSchema).max(84, 'A programme has at most 84 steps.'),
    followsClockChange: z.boolean(),
    driftMin: between('Clock drift', { min: -720, max: 720 }, 'minutes'),
    powerReserveH: between('Power reserve', { min: 0, max: 20_000 }, 'hours').nullable(),
  }),
  z.strictObject({ kind: z.literal('supplier-contactor'), windows: z.array(switchStepSchema).max(84) }),
]) satisfies z.ZodType<Controller>

const known = <T extends z.ZodType>(schema: T) => schema.nullable()
export const circuitSchema = z.strictObject({
  supplyVoltageV: between('Supply voltage', SUPPLY_V, 'V'),
  breakerA: known(between('Breaker', { min: 1, max: 400 }, 'A')),
  conductor: known(
    z.strictObject({
      size: z.string().min(1).max(8),
      system: z.enum(['awg', 'mm2']),
      material: z.enum(['copper', 'aluminium']),
      ratingC: z.union([z.literal(60), z.literal(70), z.literal(75), z.literal(90)]),
    }),
  ),
  lengthM: known(between('Cable length', { min: 0.1, max: 500 }, 'm')),
  ambientC: known(between('Ambient temperature of the cable', { min: -20, max: 80 }, '°C')),
  groupedConductors: known(z.number().int().min(1).max(60)),
  contactRatingA: known(between('Contact rating', { min: 0.5, max: 400 }, 'A')),
  contactRatingClass: known(z.enum(['resistive', 'ac-1', 'general-use', 'ac-3'])),
  polesSwitched: known(z.union([z.literal(1), z.literal(2), z.literal(3)])),
  isolatorInSight: known(z.boolean()),
  reliefValve: known(z.boolean()),
  expansionVessel: known(z.boolean()),
  closedSystem: known(z.boolean()),
  extraLowVoltageSeparated: known(z.boolean()),
  control: known(
    z.strictObject({
      transformerSecondaryV: known(between('Transformer secondary', { min: 3, max: 48 }, 'V')),
      transformerVa: known(between('Transformer', { min: 0.5, max: 500 }, 'VA')),
      transformerRegulationFraction: known(fraction('Transformer regulation')),
      reservoirF: known(between('Reservoir capacitor', { min: 1e-6, max: 1 }, 'F')),
      reservoirRatedV: known(between('Reservoir voltage', { min: 4, max: 100 }, 'V')),
      coilRatedV: known(between('Coil voltage', { min: 3, max: 48 }, 'V')),
      coilOhm: known(between('Coil resistance', { min: 1, max: 10_000 }, 'Ω')),
      driver: known(
        z.strictObject({
          maxCurrentA: between('Driver current', { min: 0.01, max: 20 }, 'A'),
          baseResistorOhm: known(between('Base resistor', { min: 1, max: 1e6 }, 'Ω')),
          gainMin: known(between('Driver gain', { min: 1, max: 100_000 }, '')),
        }),
      ),
      suppression: known(z.enum(['none', 'diode', 'diode-zener', 'varistor'])),
      primaryFuseA: known(between('Primary fuse', { min: 0.01, max: 10 }, 'A')),
      loopLengthM: known(between('Control loop', { min: 0.1, max: 500 }, 'm')),
      loopOhmPerKm: known(between('Control wire', { min: 0.1, max: 500 }, 'Ω/km')),
    }),
  ),
  // Absent in revisions that are older than the field.
  markedMaxBreakerA: known(between('Largest device on the nameplate', { min: 1, max: 400 }, 'A')).exactOptional(),
  terminalRatingC: known(z.union([z.literal(60), z.literal(75)])).exactOptional(),
  inThermalInsulation: known(z.boolean()).exactOptional(),
  mainsRangeV: known(
    z
      .strictObject({ lowestV: between('Lowest mains', SUPPLY_V, 'V'), highestV: between('Highest mains', SUPPLY_V, 'V') })
      .refine((range) => range.highestV >= range.lowestV, {
        error: 'The highest reading is below the lowest. Exchange them.',
        path: ['highestV'],
      }),
  ).exactOptional(),
}) satisfies z.ZodType<Circuit>

export const installationSchema = z.strictObject({
  load: z.strictObject({ kind: z.literal('storage-heater'), tank: tankSchema }),
  controller: controllerSchema,
  circuit: circuitSchema,
}) satisfies z.ZodType<Installation>
