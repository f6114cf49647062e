/** What a second press and a held button do, in a sentence with the timer's own minutes. Shared with the browser. */
import { runsOfPresses } from '#lib/core/controller/presses.ts'
import { runDuration } from '#lib/core/controller/run-duration.ts'
import type { Controller } from '#lib/core/controller/types.ts'

/** Held for so long past its end, as an example. */
const HELD_PAST_MIN = 10

/** `null` for what is not started by a press of a button. */
export function pressWords(controller: Controller): string | null {
  if (controller.kind !== 'one-shot-rc' && controller.kind !== 'one-shot-fixed') return null
  const { nominalMin } = runDuration(controller, [])
  if (nominalMin === null) return null
  const runMin = Math.round(nominalMin)
  const endOf = (presses: Parameters<typeof runsOfPresses>[0]) => Math.round(runsOfPresses(presses, runMin)[0]?.endMin ?? runMin)
  const half = Math.round(runMin / 2)
  const again = endOf([
    { pressedAtMin: 0, releasedAtMin: 0 },
    { pressedAtMin: half, releasedAtMin: half },
  ])
  const held = endOf([{ pressedAtMin: 0, releasedAtMin: runMin + HELD_PAST_MIN }])
  return `Of a run of ${runMin} min: pressed again after ${half} min it still ends after ${again}; held down for ${held} min it ends when let go, and a stuck button keeps it on.`
}
