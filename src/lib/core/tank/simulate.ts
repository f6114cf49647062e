/**
 * Steps a stratified tank through power windows and draws. Per step: draw as plug flow, element heat, loss and conduction,
 * then inversion mixing. Steps end on every event; a minute while something happens, up to ten when nothing does.
 * Every joule is booked, so energy in − delivered − lost = change of storage to rounding.
 */
import type { MinuteInterval } from '../time/types.ts'
import { SERVED_MARGIN_K } from './defaults.ts'
import type { TankModel } from './model.ts'

const S_PER_MIN = 60
const ACTIVE_STEP_MIN = 1
/** Near the set point a shorter step keeps the thermostat's overshoot under 0.2 K. */
const CLOSE_STEP_MIN = 0.25
const CLOSE_TO_SET_K = 3
const IDLE_STEP_MIN = 10

export interface TankState {
  readonly nodesC: readonly number[]
  /** Whether each thermostat is calling for heat; it remembers while the power is off. */
  readonly upperCalls: boolean
  readonly lowerCalls: boolean
}

/** A mixed draw at the tap: flow held, tempered to `useTemperatureC` while the tank can. */
export interface MixedDraw extends MinuteInterval {
  readonly flowLPerMin: number
  readonly useTemperatureC: number
}

export interface Programme extends MinuteInterval {
  readonly on: readonly MinuteInterval[]
  readonly draws: readonly MixedDraw[]
  readonly sample?: (minute: number, state: TankState) => void
}

export interface Simulation {
  readonly end: TankState
  readonly energyInJ: number
  readonly energyDeliveredJ: number
  readonly energyLostJ: number
  /** Minutes of each draw that were warm enough. */
  readonly servedMin: readonly number[]
  /** When an element was really on, in order, merged. */
  readonly heating: readonly (MinuteInterval & { readonly powerW: number })[]
}

export const uniformState = (temperatureC: number, nodes: number): TankState => ({
  nodesC: Array.from({ length: nodes }, () => temperatureC),
  upperCalls: true,
  lowerCalls: true,
})

export function simulate(tank: TankModel, start: TankState, programme: Programme): Simulation {
  const t = Float64Array.from(start.nodesC)
  const n = t.length
  let { upperCalls, lowerCalls } = start
  let energyInJ = 0
  let energyDeliveredJ = 0
  let energyLostJ = 0
  const servedMin = programme.draws.map(() => 0)
  const heating: { startMin: number; endMin: number; powerW: number }[] = []
  const events = eventsOf(programme)
  let eventIndex = 0
  let minute = programme.startMin
  programme.sample?.(minute, stateOf(t, upperCalls, lowerCalls))

  while (minute < programme.endMin - 1e-9) {
    while ((events[eventIndex] ?? Infinity) <= minute + 1e-9) eventIndex++
    const nextEvent = Math.min(events[eventIndex] ?? Infinity, programme.endMin)
    const powered = inside(programme.on, minute)
    ;[upperCalls, lowerCalls] = thermostats({ tank, t, upperCalls, lowerCalls })
    const element = powered ? (upperCalls && tank.upper ? tank.upper : lowerCalls ? tank.lower : null) : null
    const drawIndex = programme.draws.findIndex((draw) => minute >= draw.startMin - 1e-9 && minute < draw.endMin - 1e-9)
    const near = element && tank.setPointC - (t[element.node] ?? 0) < CLOSE_TO_SET_K
    const longest = near ? CLOSE_STEP_MIN : element || drawIndex >= 0 ? ACTIVE_STEP_MIN : IDLE_STEP_MIN
    const stepMin = Math.min(longest, nextEvent - minute)

    const draw = programme.draws[drawIndex]
    if (draw) {
      const outletC = t[0] ?? 0
      const needed = draw.useTemperatureC - tank.inletC
      const hotFraction = outletC > draw.useTemperatureC ? needed / (outletC - tank.inletC) : 1
      const moved = drawOff({ tank, t, volumeL: draw.flowLPerMin * hotFraction * stepMin })
      energyDeliveredJ += moved
      if (outletC >= draw.useTemperatureC - SERVED_MARGIN_K) servedMin[drawIndex] = (servedMin[drawIndex] ?? 0) + stepMin
    }
    if (element) {
      const heatJ = element.powerW * stepMin * S_PER_MIN
      t[element.node] = (t[element.node] ?? 0) + heatJ / tank.nodeHeatJPerK
      energyInJ += heatJ
      const last = heating.at(-1)
      if (last && Math.abs(last.endMin - minute) < 1e-9 && last.powerW === element.powerW) last.endMin = minute + stepMin
      else heating.push({ startMin: minute, endMin: minute + stepMin, powerW: element.powerW })
    }
    energyLostJ += leak({ tank, t, stepMin })
    mixInversions(t, n)
    minute += stepMin
    programme.sample?.(minute, stateOf(t, upperCalls, lowerCalls))
  }
  return { end: stateOf(t, upperCalls, lowerCalls), energyInJ, energyDeliveredJ, energyLostJ, servedMin, heating }
}

const stateOf = (t: Float64Array, upperCalls: boolean, lowerCalls: boolean): TankState => ({
  nodesC: Array.from(t),
  upperCalls,
  lowerCalls,
})

function eventsOf({ on, draws }: Programme): readonly number[] {
  return [...on, ...draws].flatMap((interval) => [interval.startMin, interval.endMin]).sort((one, other) => one - other)
}

const inside = (intervals: readonly MinuteInterval[], minute: number): boolean =>
  intervals.some((interval) => minute >= interval.startMin - 1e-9 && minute < interval.endMin - 1e-9)

interface Thermostats {
  readonly tank: TankModel
  readonly t: Float64Array
  readonly upperCalls: boolean
  readonly lowerCalls: boolean
}

/** Each thermostat opens at the set point and closes a dead band below; the upper has priority, never both. */
function thermostats({ tank, t, upperCalls, lowerCalls }: Thermostats): [boolean, boolean] {
  const next = (calls: boolean, node: number): boolean => {
    const temperatureC = t[node] ?? 0
    return temperatureC >= tank.setPointC ? false : temperatureC < tank.setPointC - tank.deadBandK ? true : calls
  }
  return [tank.upper ? next(upperCalls, tank.upper.node) : false, tank.lower ? next(lowerCalls, tank.lower.node) : false]
}

/** Moves water up by plug flow, cold in at the bottom; returns the heat that left above the inlet temperature. */
function drawOff({ tank, t, volumeL }: { readonly tank: TankModel; readonly t: Float64Array; readonly volumeL: number }): number {
  const n = t.length
  let deliveredJ = 0
  let leftL = volumeL
  while (leftL > 1e-12) {
    const partL = Math.min(leftL, tank.nodeVolumeL)
    const fraction = partL / tank.nodeVolumeL
    deliveredJ += fraction * tank.nodeHeatJPerK * ((t[0] ?? 0) - tank.inletC)
    for (let node = 0; node < n; node++) {
      const below = node === n - 1 ? tank.inletC : (t[node + 1] ?? 0)
      t[node] = (t[node] ?? 0) * (1 - fraction) + below * fraction
    }
    leftL -= partL
  }
  return deliveredJ
}

/** Loss to the room and conduction between nodes; returns the heat lost to the room. */
function leak({ tank, t, stepMin }: { readonly tank: TankModel; readonly t: Float64Array; readonly stepMin: number }): number {
  const n = t.length
  const perStep = (stepMin * S_PER_MIN) / tank.nodeHeatJPerK
  let lostJ = 0
  let above = t[0] ?? 0
  for (let node = 0; node < n; node++) {
    const own = t[node] ?? 0
    const below = node === n - 1 ? own : (t[node + 1] ?? 0)
    const lossW = (tank.lossWPerK[node] ?? 0) * (own - tank.ambientC)
    t[node] = own + perStep * (tank.conductionWPerK * (above - own + below - own) - lossW)
    lostJ += lossW * stepMin * S_PER_MIN
    above = own
  }
  return lostJ
}

/** Warmer water below colder mixes at once: pools adjacent nodes until temperature never rises downwards. */
export function mixInversions(t: Float64Array, n: number): void {
  for (let node = 1; node < n; node++) {
    if ((t[node] ?? 0) <= (t[node - 1] ?? 0)) continue
    let first = node
    let sum = t[node] ?? 0
    while (first > 0 && sum / (node - first + 1) > (t[first - 1] ?? 0)) {
      first--
      sum += t[first] ?? 0
    }
    t.fill(sum / (node - first + 1), first, node + 1)
  }
}
