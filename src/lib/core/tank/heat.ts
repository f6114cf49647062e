/** Lets time pass with no water drawn: power windows, thermostats and elements, from one event to the next. */
import { advance, type Motion } from './advance.ts'
import type { PlacedElement, TankModel } from './model.ts'

const S_PER_MIN = 60
const SAME_MIN = 1e-9
/** A thermostat's limit counts as reached this close to it: above the root finder's rounding. */
const REACHED_K = 1e-6

export interface Heating {
  readonly tank: TankModel
  readonly motion: Motion
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

/** Returns the minute reached, which is `untilMin`. */
export function heatUntil(run: Heating, fromMin: number, untilMin: number): number {
  const { tank, motion, edges } = run
  let minute = fromMin
  while (untilMin - minute > SAME_MIN) {
    while (run.nextEdge < edges.length && edges[run.nextEdge]! <= minute + SAME_MIN) run.nextEdge++
    const stopMin = Math.min(untilMin, edges[run.nextEdge] ?? Infinity, run.nextSampleMin)
    const element = elementOn(run, run.nextEdge % 2 === 1)
    motion.heatNode = element?.node ?? -1
    motion.heatKPerS = element ? element.powerW / tank.nodeHeatJPerK : 0
    const movedMin = advance(motion, (stopMin - minute) * S_PER_MIN) / S_PER_MIN
    if (element) book(run, { fromMin: minute, movedMin, powerW: element.powerW })
    minute = stopMin - minute - movedMin < SAME_MIN ? stopMin : minute + movedMin
    if (minute >= run.nextSampleMin) {
      run.sample?.(minute)
      run.nextSampleMin += run.sampleEveryMin
    }
  }
  return minute
}

/** What heats now; sets what the column must watch for. Upper first, never both; each thermostat closes a dead band below the set point. */
function elementOn(run: Heating, powered: boolean): PlacedElement | null {
  const { upper, lower } = run.tank
  const { watch } = run.motion
  watch.risingNode = -1
  watch.fallingNode[0] = -1
  watch.fallingNode[1] = -1
  run.upperCalls = upper !== null && calls(run, upper.node, run.upperCalls)
  run.lowerCalls = lower !== null && calls(run, lower.node, run.lowerCalls)
  if (!powered) return null
  if (upper && !run.upperCalls) watchFor(run, 0, upper.node)
  if (lower && !run.upperCalls && !run.lowerCalls) watchFor(run, 1, lower.node)
  const element = run.upperCalls ? upper : run.lowerCalls ? lower : null
  if (element) {
    watch.risingNode = element.node
    watch.risingToK = run.tank.setPointC - run.tank.ambientC
  }
  return element
}

function calls({ tank, motion }: Heating, node: number, before: boolean): boolean {
  const temperatureC = motion.column.thetaK[node]! + tank.ambientC
  return temperatureC >= tank.setPointC - REACHED_K ? false : temperatureC < tank.setPointC - tank.deadBandK + REACHED_K ? true : before
}

/** Ends a step where a satisfied thermostat would close again. */
function watchFor({ tank, motion }: Heating, place: 0 | 1, node: number): void {
  motion.watch.fallingNode[place] = node
  motion.watch.fallingToK[place] = tank.setPointC - tank.deadBandK - tank.ambientC
}

interface Heated {
  readonly fromMin: number
  readonly movedMin: number
  readonly powerW: number
}

function book(run: Heating, { fromMin, movedMin, powerW }: Heated): void {
  run.energyInJ += powerW * movedMin * S_PER_MIN
  const last = run.heating[run.heating.length - 1]
  if (last && last.powerW === powerW && Math.abs(last.endMin - fromMin) < SAME_MIN) last.endMin = fromMin + movedMin
  else run.heating.push({ startMin: fromMin, endMin: fromMin + movedMin, powerW })
}
