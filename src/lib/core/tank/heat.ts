/** Lets time pass with no water drawn: power windows, thermostats and elements, from one event to the next. */
import { advance, type Motion, RISING } from './advance.ts'
import type { PlacedElement, TankModel } from './model.ts'

const S_PER_MIN = 60
const SAME_MIN = 1e-9
/** A thermostat's limit counts as reached this close to it: above the root finder's rounding. */
const REACHED_K = 1e-6

export interface Heating {
  readonly tank: TankModel
  readonly motion: Motion
  minute: number
  /** Moments at which the power goes on, off, on… */
  readonly edges: readonly number[]
  nextEdge: number
  upperCalls: boolean
  lowerCalls: boolean
  energyInJ: number
  readonly heating: { startMin: number; endMin: number; powerW: number }[]
  readonly sample: ((minute: number) => void) | null
  readonly sampleEveryMin: number
  nextSampleMin: number
}

export function heatUntil(run: Heating, untilMin: number): void {
  const { tank, motion, edges } = run
  while (untilMin - run.minute > SAME_MIN) {
    while (run.nextEdge < edges.length && edges[run.nextEdge]! <= run.minute + SAME_MIN) run.nextEdge++
    const stopMin = Math.min(untilMin, edges[run.nextEdge] ?? Infinity, run.nextSampleMin)
    const element = elementOn(run, run.nextEdge % 2 === 1)
    motion.heatNode = element?.node ?? -1
    motion.heatKPerS = element ? element.powerW / tank.nodeHeatJPerK : 0
    advance(motion, (stopMin - run.minute) * S_PER_MIN)
    const reachedMin = run.minute + motion.movedS / S_PER_MIN
    if (element) book(run, element.powerW)
    run.minute = stopMin - reachedMin < SAME_MIN ? stopMin : reachedMin
    if (run.minute >= run.nextSampleMin) {
      run.sample?.(run.minute)
      run.nextSampleMin += run.sampleEveryMin
    }
  }
}

/** What heats now; sets what the column must watch for. Upper first, never both; each thermostat closes a dead band below the set point. */
function elementOn(run: Heating, powered: boolean): PlacedElement | null {
  const { upper, lower } = run.tank
  const { watch } = run.motion
  for (let place = 0; place < watch.node.length; place++) watch.node[place] = -1
  run.upperCalls = upper !== null && calls(run, upper.node, run.upperCalls)
  run.lowerCalls = lower !== null && calls(run, lower.node, run.lowerCalls)
  if (!powered) return null
  if (upper && !run.upperCalls) watchFall(run, RISING + 1, upper.node)
  if (lower && !run.upperCalls && !run.lowerCalls) watchFall(run, RISING + 2, lower.node)
  const element = run.upperCalls ? upper : run.lowerCalls ? lower : null
  if (element) {
    watch.node[RISING] = element.node
    watch.toK[RISING] = run.tank.setPointC - run.tank.ambientC
  }
  return element
}

function calls({ tank, motion }: Heating, node: number, before: boolean): boolean {
  const temperatureC = motion.column.thetaK[node]! + tank.ambientC
  return temperatureC >= tank.setPointC - REACHED_K ? false : temperatureC < tank.setPointC - tank.deadBandK + REACHED_K ? true : before
}

/** Ends a step where a satisfied thermostat would close again. */
function watchFall({ tank, motion }: Heating, place: number, node: number): void {
  motion.watch.node[place] = node
  motion.watch.toK[place] = tank.setPointC - tank.deadBandK - tank.ambientC
}

/** Books the step that was just moved. */
function book(run: Heating, powerW: number): void {
  const { movedS } = run.motion
  run.energyInJ += powerW * movedS
  const endMin = run.minute + movedS / S_PER_MIN
  const last = run.heating[run.heating.length - 1]
  if (last && last.powerW === powerW && Math.abs(last.endMin - run.minute) < SAME_MIN) last.endMin = endMin
  else run.heating.push({ startMin: run.minute, endMin, powerW })
}
