/** The settings of a dial or a fixed one-shot that reach a run, shortest first. */
import { meets, MOST_SUGGESTIONS, none, type PartsAdvice, type RunNeed, spanWords, type Suggestion } from './advice.ts'
import { runDuration } from './run-duration.ts'
import type { DialController, OneShotFixedController } from './types.ts'

/** Settings are turned in steps that a hand can set (common practice, no source). */
const SETTING_STEP_MIN = 5
/** The longest electronic timer that is stocked as a matter of course (common practice, no source). */
const LONGEST_FIXED_MIN = 720

export function settingAdvice(controller: DialController | OneShotFixedController, need: RunNeed): PartsAdvice {
  const dial = controller.kind === 'dial'
  const longestMin = dial ? controller.scaleMaxMin : LONGEST_FIXED_MIN
  const suggestions: Suggestion[] = []
  for (
    let settingMin = SETTING_STEP_MIN;
    settingMin <= longestMin && suggestions.length < MOST_SUGGESTIONS;
    settingMin += SETTING_STEP_MIN
  ) {
    const changed = { ...controller, settingMin }
    const duration = runDuration(changed, [])
    if (settingMin === controller.settingMin || !meets(duration, need)) continue
    suggestions.push({
      controller: changed,
      what: dial ? `Set the dial to ${settingMin} min` : `Fit a timer of ${settingMin} min`,
      duration,
      reason: `It then runs ${spanWords(duration)}; ${Math.ceil(need.minMin)} min are needed.`,
    })
  }
  if (suggestions.length > 0) return { status: 'found', suggestions }
  const atEnd = runDuration({ ...controller, settingMin: longestMin }, [])
  if (atEnd.guaranteed.minMin < need.minMin) {
    return none(
      dial
        ? `Fit a timer with a longer scale: at the end of its scale, ${longestMin} min, it runs ${spanWords(atEnd)}; ${Math.ceil(need.minMin)} min are needed.`
        : `No timer up to ${longestMin} min is long enough; ${Math.ceil(need.minMin)} min are needed.`,
    )
  }
  return none(
    `Its tolerance of ${(controller.toleranceFraction * 100).toFixed(0)} % is too wide: a setting that surely reaches ${Math.ceil(need.minMin)} min may pass ${Math.floor(need.limitMin)} min.`,
  )
}
