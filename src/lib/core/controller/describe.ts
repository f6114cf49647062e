/** A controller in one plain line, for tables, letters and the electrician. */
import type { Controller, SwitchStep } from './types.ts'

const WEEKDAYS = ['Mon', 'Tue', 'Wed', 'Thu', 'Fri', 'Sat', 'Sun']
/** A minute of a switch's day as its dial shows it; the day after wraps. */
export const clockWords = (minute: number): string =>
  `${String(Math.floor((minute % 1440) / 60)).padStart(2, '0')}:${String(Math.round(minute % 60)).padStart(2, '0')}`
const steps = (list: readonly SwitchStep[]): string =>
  list.length === 0
    ? 'without a programme'
    : list
        .map((step) => `${clockWords(step.onMin)}–${clockWords(step.offMin)} ${step.weekday === null ? 'daily' : WEEKDAYS[step.weekday]}`)
        .join(', ')

const prefixed = (value: number, steps: readonly (readonly [number, string])[]): string => {
  const [scale, unit] = steps.find(([size]) => value >= size) ?? steps.at(-1) ?? [1, '']
  return `${Number((value / scale).toPrecision(3))} ${unit}`
}
export const formatOhm = (ohm: number): string =>
  prefixed(ohm, [
    [1e9, 'GΩ'],
    [1e6, 'MΩ'],
    [1e3, 'kΩ'],
    [1, 'Ω'],
  ])
export const formatFarad = (farad: number): string =>
  prefixed(farad, [
    [1e-3, 'mF'],
    [1e-6, 'µF'],
    [1e-9, 'nF'],
  ])

export function describeController(controller: Controller): string {
  switch (controller.kind) {
    case 'one-shot-rc':
      return `One-shot timer, ${formatOhm(controller.resistanceOhm)} and ${formatFarad(controller.capacitanceF)}`
    case 'one-shot-fixed':
      return `One-shot timer of ${controller.settingMin} min`
    case 'dial':
      return `Dial set to ${controller.settingMin} min`
    case 'time-switch':
      return `Time switch ${steps(controller.programme)}`
    case 'supplier-contactor':
      return `Supplier's contactor ${steps(controller.windows)}`
  }
}
