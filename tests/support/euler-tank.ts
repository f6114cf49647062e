/**
 * The same tank stepped by a plain fixed one-second Euler loop: the usual way to compute it, the judge of the event-driven one
 * and its rival in the benchmark. Shares the equations with it and no code.
 */
import type { TankModel } from '#lib/core/tank/model.ts'
import type { Programme, TankState } from '#lib/core/tank/simulate.ts'

export interface EulerDay {
  readonly nodesC: Float64Array
  readonly energyInJ: number
  readonly energyDeliveredJ: number
  readonly energyLostJ: number
  readonly servedMin: readonly number[]
}

export function eulerDay(tank: TankModel, start: TankState, { startMin, endMin, on, draws }: Programme, stepS = 1): EulerDay {
  const n = start.nodesC.length
  const t = Float64Array.from(start.nodesC)
  const next = new Float64Array(n)
  let { upperCalls, lowerCalls } = start
  let energyInJ = 0
  let energyDeliveredJ = 0
  let energyLostJ = 0
  const servedMin = draws.map(() => 0)
  let slugLeftS = 0
  const steps = Math.round(((endMin - startMin) * 60) / stepS)
  for (let step = 0; step < steps; step++) {
    const minute = startMin + (step * stepS) / 60
    const index = draws.findIndex((one) => minute >= one.startMin - 1e-9 && minute < one.endMin - 1e-9)
    const draw = draws[index]
    if (!draw) slugLeftS = 0
    else if (slugLeftS <= 1e-6) {
      const use = draw.useTemperatureC
      const flow = use === null || t[0]! <= use ? draw.flowLPerMin : (draw.flowLPerMin * (use - tank.inletC)) / (t[0]! - tank.inletC)
      const slugMin = Math.min(1, draw.endMin - minute, tank.nodeVolumeL / flow)
      const fraction = (flow * slugMin) / tank.nodeVolumeL
      if (t[0]! >= (use ?? 0) - 1) servedMin[index]! += slugMin
      energyDeliveredJ += fraction * tank.nodeHeatJPerK * (t[0]! - tank.inletC)
      for (let node = 0; node < n; node++) t[node]! += fraction * ((node === n - 1 ? tank.inletC : t[node + 1]!) - t[node]!)
      slugLeftS += slugMin * 60
    }
    slugLeftS -= stepS
    if (tank.upper) {
      if (t[tank.upper.node]! >= tank.setPointC) upperCalls = false
      else if (t[tank.upper.node]! < tank.setPointC - tank.deadBandK) upperCalls = true
    } else upperCalls = false
    if (tank.lower) {
      if (t[tank.lower.node]! >= tank.setPointC) lowerCalls = false
      else if (t[tank.lower.node]! < tank.setPointC - tank.deadBandK) lowerCalls = true
    } else lowerCalls = false
    const powered = on.some((one) => minute >= one.startMin - 1e-9 && minute < one.endMin - 1e-9)
    const element = powered ? (upperCalls ? tank.upper : lowerCalls ? tank.lower : null) : null
    for (let node = 0; node < n; node++) {
      const lossW = tank.lossWPerK[node]! * (t[node]! - tank.ambientC)
      let gainW = -lossW
      if (node > 0) gainW += tank.conductionWPerK * (t[node - 1]! - t[node]!)
      if (node < n - 1) gainW += tank.conductionWPerK * (t[node + 1]! - t[node]!)
      if (element?.node === node) {
        gainW += element.powerW
        energyInJ += element.powerW * stepS
      }
      energyLostJ += lossW * stepS
      next[node] = t[node]! + (gainW * stepS) / tank.nodeHeatJPerK
    }
    t.set(next)
    // Whatever turned over mixes: neighbours are averaged until nothing is warmer than what lies above it.
    for (let low = 1; low < n; low++) {
      let first = low
      while (first > 0 && meanOf(t, first, low) > t[first - 1]!) first--
      if (first < low) t.fill(meanOf(t, first, low), first, low + 1)
    }
  }
  return { nodesC: t, energyInJ, energyDeliveredJ, energyLostJ, servedMin }
}

function meanOf(t: Float64Array, first: number, last: number): number {
  let sum = 0
  for (let node = first; node <= last; node++) sum += t[node]!
  return sum / (last - first + 1)
}
