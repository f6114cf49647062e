/** Every published value of the fixture, computed by the core; a row without a computation, or the other way round, fails. */
import { describe, expect, it } from 'vitest'
import { decimalReductionMin } from '#lib/core/hygiene/kill.ts'
import { SCALD_TABLE } from '#lib/core/hygiene/scald.ts'
import { mixInversions } from '#lib/core/tank/column.ts'
import { inletC } from '#lib/core/tank/inlet.ts'
import { drawPatternL, lossWPerK } from '#lib/core/tank/loss.ts'
import { actualPowerW, tankModel, type TankModel } from '#lib/core/tank/model.ts'
import { recoveryGalPerH } from '#lib/core/tank/recovery.ts'
import { hotFraction, simulate } from '#lib/core/tank/simulate.ts'
import { densityKgPerM3, expansionL, specificHeatKjPerKgK } from '#lib/core/tank/water.ts'
import { fFromC, kwhFromJ, usGalFromL, W_PER_K_PER_BTU_PER_H_F } from '#lib/core/units.ts'
import { PATTERNS } from '../../fixtures/tank/certification.data.ts'
import { CHECK_VALUES, HEAT_UPS, OCHRE_RUNS, OCHRE_UNIT_VALUES, type PublishedRow, WHY } from '../../fixtures/tank/published-rows.data.ts'
import { dailyMean } from '../../support/certification-day.ts'
import { always, drawnInAMinute, FIFTY_GAL, from, idle, meanOf, modelOf, OCHRE_WATER, UNIT_TANK } from '../../support/tank-cases.ts'

type Computed = Readonly<Record<string, () => number>>

function holds(rows: readonly PublishedRow[], computed: Computed): void {
  it('has a computation for every published row, and a row for every computation', () => {
    expect(Object.keys(computed).sort()).toEqual(rows.map((row) => row.id).sort())
  })
  it.each(rows)('$id: $what is $expected $unit ($source, $known)', ({ id, expected, tolerance, why }) => {
    const value = computed[id]?.()
    expect(Math.abs((value ?? NaN) - expected), `${value}, tolerance: ${WHY[why]}`).toBeLessThanOrEqual(tolerance + 1e-12)
  })
}

const OFF_WITHOUT_LOSS = { upperElement: null, shareBelowLowerFraction: 0, loss: { kind: 'ua', lossWPerK: 1e-9 } } as const
const untilSatisfiedMin = (tank: TankModel, coldC: number): number => from(tank, coldC, always(300)).heating[0]?.endMin ?? NaN
/** The upper element alone, so that its thermostat's opening ends the heating. */
const upperMin = (share: number): number =>
  untilSatisfiedMin(modelOf({ lowerElement: null, shareAboveUpperFraction: share, loss: { kind: 'ua', lossWPerK: 1e-9 } }), 15)
const patternGal = (pattern: keyof typeof PATTERNS): number => PATTERNS[pattern].reduce((sum, [, volumeGal]) => sum + volumeGal, 0)
const cpscSeconds = (temperatureF: number): number => SCALD_TABLE.find((row) => row.temperatureF === temperatureF)?.cpscSeconds ?? NaN
const mainsF = (day: string): number => fFromC(inletC({ kind: 'climate', meanAirC: 10, swingAirK: 25, hemisphere: 'north' }, day))
const CYLINDER = tankModel(
  { ...FIFTY_GAL, actualVolumeL: Math.PI * 40, heightM: 1, loss: { kind: 'ua', lossWPerK: Math.PI * 0.48 } },
  { supplyVoltageV: 240, inletC: 10, water: OCHRE_WATER },
)
const mixed = (nodes: readonly number[]): Float64Array => {
  const t = Float64Array.from(nodes)
  mixInversions(t, t.length)
  return t
}
const ALWAYS_ON = [{ startMin: 0, endMin: 1440 }]

describe('check values', () => {
  holds(CHECK_VALUES, {
    'CV-01': () => recoveryGalPerH({ powerW: 4_500, riseF: 80 }),
    'CV-03 2500 W': () => recoveryGalPerH({ powerW: 2_500, riseF: 100 }),
    'CV-03 3500 W': () => recoveryGalPerH({ powerW: 3_500, riseF: 100 }),
    'CV-02 power': () => actualPowerW({ ratedPowerW: 5_500, ratedVoltageV: 240 }, 208),
    'CV-02 recovery': () => recoveryGalPerH({ powerW: actualPowerW({ ratedPowerW: 5_500, ratedVoltageV: 240 }, 208), riseF: 80 }),
    'CV-04': () => untilSatisfiedMin(modelOf(OFF_WITHOUT_LOSS), 15),
    'CV-05 quarter': () => upperMin(1 / 4),
    'CV-05 third': () => upperMin(1 / 3),
    'CV-06 imperial': () => lossWPerK({ kind: 'uef', uef: 0.93, drawPattern: 'medium' }, 170) / W_PER_K_PER_BTU_PER_H_F,
    'CV-06 metric': () => lossWPerK({ kind: 'uef', uef: 0.93, drawPattern: 'medium' }, 170),
    'CV-07 very-small': () => patternGal('very-small') + usGalFromL(drawPatternL('very-small')) - 10,
    'CV-07 low': () => patternGal('low') + usGalFromL(drawPatternL('low')) - 38,
    'CV-07 medium': () => patternGal('medium') + usGalFromL(drawPatternL('medium')) - 55,
    'CV-07 high': () => patternGal('high') + usGalFromL(drawPatternL('high')) - 84,
    'CV-08': () => meanOf(from(modelOf(), 60, idle(1_440)).end.nodesC),
    'CV-09 node to node': () => 1 / CYLINDER.conductionWPerK,
    'CV-09 end node': () => 1 / (CYLINDER.lossWPerK[0] ?? NaN),
    'CV-09 middle node': () => 1 / (CYLINDER.lossWPerK[5] ?? NaN),
    'CV-09 capacity': () => CYLINDER.nodeHeatJPerK,
    'CV-10': () => Math.max(...Array.from(mixed([28, 29, 30, 31, 32, 33, 34, 35, 36, 37, 38, 39]), (value) => Math.abs(value - 33.5))),
    'CV-11 51.7': () => hotFraction({ useC: 41, hotC: 51.7, coldC: 15 }),
    'CV-11 60': () => hotFraction({ useC: 41, hotC: 60, coldC: 15 }),
    'CV-12 February': () => mainsF('2026-02-14'),
    'CV-12 August': () => mainsF('2026-08-13'),
    'CV-13 energy': () => kwhFromJ(from(modelOf(), 15, always(15)).energyInJ),
    'CV-13 volume': () => from(modelOf(), 15, always(15)).energyInJ / (modelOf().nodeHeatJPerK / modelOf().nodeVolumeL) / 25,
    'CV-14 density': () => densityKgPerM3(60),
    'CV-14 heat': () => specificHeatKjPerKgK(60),
    'CV-15': () => expansionL(170.3, { fromC: 15, toC: 60 }),
    'CV-16 120': () => cpscSeconds(120),
    'CV-16 130': () => cpscSeconds(130),
    'CV-16 140': () => cpscSeconds(140),
    'CV-16 150': () => cpscSeconds(150),
    'CV-17 60': () => decimalReductionMin(60) ?? NaN,
    'CV-17 55': () => decimalReductionMin(55) ?? NaN,
    'CV-18': () => lossWPerK({ kind: 'class', label: 'C' }, 200) * 45,
    'CV-23': () => from(modelOf(), 15, always(15)).end.nodesC[0] ?? NaN,
    'CV-24': () => {
      const nightOff = dailyMean({ lossWPerK: 1.313, on: [{ startMin: 300, endMin: 1_320 }] }).inKwh
      return 100 * (1 - nightOff / dailyMean({ lossWPerK: 1.313, on: ALWAYS_ON }).inKwh)
    },
  })
})

const HALF_HOT = [...Array<number>(6).fill(51.1), ...Array<number>(6).fill(45)]
const UNIFORM = Array<number>(12).fill(51.1)
const OCHRE_INVERSION = [34, 35, 34, 33, 32, 31, 32, 33, 32, 31, 30, 30]
const perMinuteW = (energyJ: number): number => energyJ / 60
const after100L = (node: number): number => drawnInAMinute(CYLINDER, UNIFORM, 100).end.nodesC[node - 1] ?? NaN

describe('unit values of an open 12-node model', () => {
  holds(OCHRE_UNIT_VALUES, {
    volume: () => CYLINDER.volumeL,
    'whole capacity': () => CYLINDER.nodeHeatJPerK * 12,
    'whole resistance': () => 1 / CYLINDER.lossWPerK.reduce((sum, value) => sum + value, 0),
    '1 L at 51.1 °C': () => perMinuteW(drawnInAMinute(CYLINDER, UNIFORM, 1).energyDeliveredJ),
    '100 L, top half hotter': () => perMinuteW(drawnInAMinute(CYLINDER, HALF_HOT, 100).energyDeliveredJ),
    '100 L, node 1': () => after100L(1),
    '100 L, node 3': () => after100L(3),
    '100 L, nodes 10 to 12': () => after100L(10),
    tempered: () => perMinuteW(drawnInAMinute(CYLINDER, UNIFORM, 1, 40).energyDeliveredJ),
    'tempered volume': () => hotFraction({ useC: 40, hotC: 51.1, coldC: 10 }),
    unmet: () => (4_183 * 50) / 60 - perMinuteW(drawnInAMinute(CYLINDER, Array<number>(12).fill(55), 1, 60).energyDeliveredJ),
    'inversion, node 1': () => mixed(OCHRE_INVERSION)[0] ?? NaN,
    'inversion, node 3': () => mixed(OCHRE_INVERSION)[2] ?? NaN,
    'inversion, node 6': () => mixed(OCHRE_INVERSION)[5] ?? NaN,
    'inversion, node 8': () => mixed(OCHRE_INVERSION)[7] ?? NaN,
    'inversion, node 12': () => mixed(OCHRE_INVERSION)[11] ?? NaN,
  })
})

const heatUp = ({ volumeL, fromC, setPointC, lossWPerK: ua, powerW }: (typeof HEAT_UPS)[number], element: 'upper' | 'both') => {
  const rated = { ratedPowerW: powerW, ratedVoltageV: 240 }
  const elements = { upperElement: rated, lowerElement: element === 'both' ? rated : null }
  const tank = modelOf({ actualVolumeL: volumeL, setPointC, loss: { kind: 'ua', lossWPerK: ua }, ...elements }, fromC, OCHRE_WATER)
  const minutes = untilSatisfiedMin(tank, fromC)
  return { minutes, energyKwh: (powerW * minutes) / 60_000 }
}
const heatUpRows = Object.fromEntries(
  HEAT_UPS.flatMap((row, index) => [
    [`heat-up ${index + 1}, upper`, () => heatUp(row, 'upper').minutes],
    [`heat-up ${index + 1}, lower`, () => heatUp(row, 'both').minutes],
    [`heat-up ${index + 1}, energy`, () => heatUp(row, 'both').energyKwh],
  ]),
)
const OCHRE_TANK = modelOf({}, 15, OCHRE_WATER)
const heated = (minutes: number) => from(OCHRE_TANK, 15, always(minutes)).end.nodesC
const rested = (hours: number) => from(OCHRE_TANK, 60, idle(hours * 60)).end.nodesC
/** Outlet in the minute that ends with this many times 11.36 L drawn: the top node as the minute begins. */
const outletAfter = (minute: number): number =>
  simulate(OCHRE_TANK, from(OCHRE_TANK, 60, idle(0)).end, {
    ...idle(minute - 1),
    draws: [{ startMin: 0, endMin: minute - 1, flowLPerMin: 11.36, useTemperatureC: null }],
  }).end.nodesC[0] ?? NaN
const medium = (on: readonly { readonly startMin: number; readonly endMin: number }[]) => dailyMean({ lossWPerK: 1.313, on })
const MORNING = { startMin: 330, endMin: 510 }

describe('runs of an open 12-node model', () => {
  holds(OCHRE_RUNS, {
    ...heatUpRows,
    'top 5 min': () => heated(5)[0] ?? NaN,
    'top 10 min': () => heated(10)[0] ?? NaN,
    'top 15 min': () => heated(15)[0] ?? NaN,
    'top 20 min': () => heated(20)[0] ?? NaN,
    'top 30 min': () => heated(30)[0] ?? NaN,
    'mean 15 min': () => meanOf(heated(15)),
    'mean 60 min': () => meanOf(heated(60)),
    'mean 90 min': () => meanOf(heated(90)),
    'decay 1 h': () => meanOf(rested(1)),
    'decay 6 h': () => meanOf(rested(6)),
    'decay 8 h': () => meanOf(rested(8)),
    'decay 12 h': () => meanOf(rested(12)),
    'decay 24 h': () => meanOf(rested(24)),
    'decay 48 h': () => meanOf(rested(48)),
    'decay 24 h, top': () => rested(24)[0] ?? NaN,
    'decay 24 h, bottom': () => rested(24)[11] ?? NaN,
    'draw-off 136 L': () => outletAfter(12),
    'draw-off 148 L': () => outletAfter(13),
    'draw-off 159 L': () => outletAfter(14),
    'draw-off 170 L': () => outletAfter(15),
    'draw-off 182 L': () => outletAfter(16),
    'always on, in': () => medium(ALWAYS_ON).inKwh,
    'always on, out': () => medium(ALWAYS_ON).outKwh,
    'off 22 to 05 h, in': () => medium([{ startMin: 300, endMin: 1_320 }]).inKwh,
    'two windows, in': () => medium([MORNING, { startMin: 990, endMin: 1_170 }]).inKwh,
    'morning only, in': () => medium([{ startMin: 330, endMin: 450 }]).inKwh,
    'morning only, out': () => medium([{ startMin: 330, endMin: 450 }]).outKwh,
  })
})

describe('actual volume', () => {
  it('is 0.90 of nominal where only that is known (OpenStudio-HPXML calc_storage_tank_actual_vol, read)', () => {
    expect(tankModel({ ...UNIT_TANK, nominalVolumeL: 200 }, { supplyVoltageV: 240, inletC: 15 }).volumeL).toBeCloseTo(180, 9)
  })
})
