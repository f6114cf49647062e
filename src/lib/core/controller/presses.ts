/** What presses of a one-shot's button come to: one during a run changes nothing, one that is held keeps the load on until it is let go. */
import type { MinuteInterval } from '../time/types.ts'

/** `[pressedAtMin, releasedAtMin)`; a stuck button is released late or at infinity. */
export interface Press {
  readonly pressedAtMin: number
  readonly releasedAtMin: number
}

/**
 * On-intervals of presses in any order. The cycle ends only if the trigger is high at the end of the interval (TI SLFS022, 1992, p. 9);
 * the trigger overrides the threshold and is not read again during the interval (TI LMC555, SNAS558N, 7.4.1); let go after its
 * end, the capacitor is above threshold and the output falls at once.
 */
export function runsOfPresses(presses: readonly Press[], durationMin: number): readonly MinuteInterval[] {
  const runs: { startMin: number; endMin: number }[] = []
  for (const { pressedAtMin, releasedAtMin } of [...presses].sort((one, other) => one.pressedAtMin - other.pressedAtMin)) {
    const running = runs.at(-1)
    if (running && pressedAtMin < running.endMin) running.endMin = Math.max(running.endMin, releasedAtMin)
    else runs.push({ startMin: pressedAtMin, endMin: Math.max(pressedAtMin + durationMin, releasedAtMin) })
  }
  return runs
}
