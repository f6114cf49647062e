/** Which parts, setting or programme would give a run of the minutes needed: ranked, every one checked by the model before it is named. */
import { none, type PartsAdvice, type RunNeed } from './advice.ts'
import { programmeAdvice } from './programme-advice.ts'
import { rcAdvice } from './rc-advice.ts'
import { settingAdvice } from './setting-advice.ts'
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
