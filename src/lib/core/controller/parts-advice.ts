/** Which parts, setting or programme would give a run of the minutes needed: ranked, every one checked by the model before it is named. */
import { none, type PartsAdvice, type RunNeed } from './advice.ts'
import { programmeAdvice, surelyOnMin } from './programme-advice.ts'
import { rcAdvice } from './rc-advice.ts'
import { settingAdvice } from './setting-advice.ts'
import { runDuration } from './run-duration.ts'
import type { Controller } from './types.ts'

export function partsAdvice(controller: Controller, need: RunNeed): PartsAdvice {
  if (need.limitMin < need.minMin)
    return none(`Nothing runs for at least ${Math.ceil(need.minMin)} min and at most ${Math.floor(need.limitMin)} min.`)
  switch (controller.kind) {
    case 'one-shot-rc':
      return rcAdvice(controller, need)
    case 'one-shot-fixed':
    case 'dial':
      return settingAdvice(controller, need)
    case 'time-switch':
      return programmeAdvice(controller, need)
    case 'supplier-contactor':
      return none('Only the supplier can change its hours; ask them, or let another controller time this heater.')
  }
}

/** Whether a controller as it stands misses the need: too short, or not sure to stop. Where it cannot be said, it does not. */
export function fallsShort(controller: Controller, need: RunNeed): boolean {
  switch (controller.kind) {
    case 'one-shot-rc':
    case 'one-shot-fixed':
    case 'dial': {
      const { timesOut, guaranteed } = runDuration(controller, [])
      return timesOut !== 'always' || guaranteed.minMin < need.minMin
    }
    case 'time-switch':
      return need.readyBy !== null && surelyOnMin(controller, need.readyBy) < need.minMin
    case 'supplier-contactor':
      return false
  }
}
