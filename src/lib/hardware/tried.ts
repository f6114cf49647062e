/** What was tried on a unit's page, filled into the hardware form: from the address, so distrusted, and recorded by nobody yet. Pure. */
import { z } from 'zod'
import type { Installation } from '#lib/core/hardware/types.ts'
import type { HeatingElement } from '#lib/core/tank/types.ts'

const number = (min: number, max: number) => z.coerce.number().min(min).max(max).optional().catch(undefined)
const triedSchema = z.object({
  runMin: number(1, 720),
  elementW: number(300, 12_000),
  setPointC: number(40, 80),
  nominalVolumeL: number(10, 1_000),
})

export interface Tried {
  readonly installation: Installation
  /** What was filled in, for the reader to check. */
  readonly words: readonly string[]
}

export function triedOn(installation: Installation, query: URLSearchParams): Tried {
  const { runMin, elementW, setPointC, nominalVolumeL } = triedSchema.parse(Object.fromEntries(query))
  const { controller, load } = installation
  const { tank } = load
  const isSet = controller.kind === 'dial' || controller.kind === 'one-shot-fixed'
  const element = (one: HeatingElement | null) => one && { ...one, ratedPowerW: elementW ?? one.ratedPowerW }
  return {
    installation: {
      ...installation,
      controller: isSet && runMin !== undefined ? { ...controller, settingMin: runMin } : controller,
      load: {
        ...load,
        tank: {
          ...tank,
          upperElement: element(tank.upperElement),
          lowerElement: element(tank.lowerElement),
          setPointC: setPointC ?? tank.setPointC,
          ...(nominalVolumeL === undefined ? {} : { nominalVolumeL, actualVolumeL: null }),
        },
      },
    },
    words: [
      ...(runMin === undefined
        ? []
        : [isSet ? `setting ${runMin} min` : `a run of ${runMin} min is wanted: choose the timer’s parts or programme for it`]),
      ...(elementW === undefined ? [] : [`element ${elementW} W`]),
      ...(setPointC === undefined ? [] : [`set point ${setPointC} °C`]),
      ...(nominalVolumeL === undefined ? [] : [`tank ${nominalVolumeL} L`]),
    ],
  }
}
