/** Which single change would make a short unit ready on every day: each candidate is run through the model again before it is named. */
import { formatFarad, formatOhm } from '#lib/core/controller/describe.ts'
import { runDuration } from '#lib/core/controller/run-duration.ts'
import type {
  Controller,
  DialController,
  OneShotFixedController,
  OneShotRcController,
  TimeSwitchController,
} from '#lib/core/controller/types.ts'
import { servesWeek } from '#lib/core/tank/serves-week.ts'
import { formatMinuteOfDay } from '#lib/format.ts'
import { clockWords } from '#lib/strip/clock.ts'
import { minutes } from './assumptions.ts'
import type { DayContext, DayResult, Site, UnitHardware, Wants } from './types.ts'
import { unitDayOf, wantedOf } from './unit-day.ts'

export interface Fix {
  readonly label: string
  readonly value: string
}

interface ShortUnit {
  readonly site: Site
  readonly contexts: readonly DayContext[]
  readonly hardware: UnitHardware
  readonly wants: readonly Wants[]
  readonly days: readonly DayResult[]
  /** The one of the days that is furthest from ready. */
  readonly worst: DayResult
}

/** Settings are turned in steps that a hand can set. */
const DIAL_STEP_MIN = 5
const TRIES = 12
/** IEC 60063, E24. */
const E24 = [10, 11, 12, 13, 15, 16, 18, 20, 22, 24, 27, 30, 33, 36, 39, 43, 47, 51, 56, 62, 68, 75, 82, 91] as const
/** A switch is not lengthened by more than this: past it the hardware, not the programme, is at fault. */
const LONGEST_EXTENSION_MIN = 360

export function fixesFor(unit: ShortUnit): readonly Fix[] {
  const times = otherTimes(unit.worst)
  const change = controllerFix(unit)
  return [...(change ? [change] : []), ...times]
}

/** Whether every day is ready with another controller; readings of the old setting say nothing about the new one. */
function readyWith({ site, contexts, wants, ...unit }: ShortUnit, controller: Controller): boolean {
  const hardware: UnitHardware = { ...unit.hardware, installation: { ...unit.hardware.installation, controller }, measured: [] }
  const duration = runDuration(controller, [])
  if (duration.timesOut !== 'always') return false
  return servesWeek(contexts.map((context, index) => unitDayOf({ site, context, hardware, duration, ...wantedOf(wants[index]) })))
}

function controllerFix(unit: ShortUnit): Fix | null {
  const { controller } = unit.hardware.installation
  const needs = unit.days.flatMap((day) => day.readiness?.needs ?? [])
  const requiredMin = Math.max(0, ...needs.map((need) => need.requiredRunMin ?? 0))
  if (requiredMin === 0) return null
  switch (controller.kind) {
    case 'dial':
    case 'one-shot-fixed':
      return settingFix(unit, controller, requiredMin)
    case 'one-shot-rc':
      return resistorFix(unit, controller, requiredMin)
    case 'time-switch':
      return clockFix(unit, controller) ?? programmeFix(unit, controller)
    case 'supplier-contactor':
      return null
  }
}

function settingFix(unit: ShortUnit, controller: DialController | OneShotFixedController, requiredMin: number): Fix | null {
  const maxMin = controller.kind === 'dial' ? controller.scaleMaxMin : LONGEST_EXTENSION_MIN + controller.settingMin
  // Heating that goes on during the shower may let a setting below the required run do; the search begins two steps under it.
  const likelyMin = (Math.ceil(requiredMin / DIAL_STEP_MIN) - 2) * DIAL_STEP_MIN
  const firstMin = Math.max(likelyMin, (Math.floor(controller.settingMin / DIAL_STEP_MIN) + 1) * DIAL_STEP_MIN)
  for (let settingMin = firstMin; settingMin <= Math.min(maxMin, firstMin + TRIES * DIAL_STEP_MIN); settingMin += DIAL_STEP_MIN) {
    if (!readyWith(unit, { ...controller, settingMin })) continue
    const moreMin = settingMin - controller.settingMin
    return controller.kind === 'dial'
      ? { label: `Set the dial to ${settingMin} min`, value: `${moreMin} min more than now` }
      : { label: `Fit a timer of ${settingMin} min`, value: `${moreMin} min more than now` }
  }
  return controller.kind === 'dial'
    ? { label: 'Fit a timer with a longer scale', value: `the dial ends at ${minutes(maxMin)}; ${minutes(requiredMin)} are needed` }
    : null
}

/** The next resistor of the E24 series that is long enough and still always times out. */
function resistorFix(unit: ShortUnit, controller: OneShotRcController, requiredMin: number): Fix | null {
  const exponent = Math.floor(Math.log10(controller.resistanceOhm)) - 1
  const values = [0, 1].flatMap((decade) => E24.map((digits) => digits * 10 ** (exponent + decade)))
  for (const resistanceOhm of values.filter((value) => value > controller.resistanceOhm * 1.001)) {
    const changed = { ...controller, resistanceOhm }
    if (runDuration(changed, []).guaranteed.minMin < requiredMin) continue
    if (readyWith(unit, changed)) {
      return {
        label: `Fit a ${formatOhm(resistanceOhm)} timing resistor`,
        value: `with the ${formatFarad(controller.capacitanceF)} capacitor as it is`,
      }
    }
  }
  return null
}

/** A clock that is off is set right first: the programme may be long enough. */
function clockFix(unit: ShortUnit, controller: TimeSwitchController): Fix | null {
  const right: TimeSwitchController = { ...controller, driftMin: 0, followsClockChange: true }
  return readyWith(unit, right) ? { label: 'Set its clock right', value: 'the programme is long enough' } : null
}

/** The step that ends before, or holds, the need begins earlier by whole steps of the switch. */
function programmeFix(unit: ShortUnit, controller: TimeSwitchController): Fix | null {
  const need = unit.worst.readiness?.needs.find((outcome) => outcome.status !== 'ready')
  const index = controller.programme.findLastIndex((step) => need !== undefined && step.onMin <= need.need.readyByMin)
  const step = controller.programme[index]
  if (!need || !step) return null
  for (let earlierMin = controller.stepMin; earlierMin <= LONGEST_EXTENSION_MIN; earlierMin += controller.stepMin) {
    const onMin = step.onMin - earlierMin
    if (onMin < 0) break
    const programme = controller.programme.map((other, at) => (at === index ? { ...other, onMin } : other))
    if (readyWith(unit, { ...controller, programme })) {
      return { label: `Switch on at ${formatMinuteOfDay(onMin)}`, value: `${earlierMin} min earlier than ${formatMinuteOfDay(step.onMin)}` }
    }
  }
  return null
}

/** Nearest times at which today's hardware makes it; the model tried each. */
function otherTimes({ readiness, context }: DayResult): readonly Fix[] {
  const short = readiness?.needs.find((need) => need.status !== 'ready' && need.nextBestReadyByMin.length > 0)
  if (!short) return []
  const times = short.nextBestReadyByMin.map((minute) => clockWords(minute, context.clockChange))
  return [{ label: `Shower at ${times.join(' or ')}`, value: `instead of ${clockWords(short.need.readyByMin, context.clockChange)}` }]
}
