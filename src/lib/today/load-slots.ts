/** The building's load over a day in quarter hours: what is expected, and with every run at its longest. */
import { type LoadRun, type LoadStep, loadSteps } from '#lib/evaluation/service-load.ts'
import type { MsInterval } from '#lib/core/time/types.ts'
import { type LoadSlot, SLOT_MIN } from './types.ts'

const SLOT_MS = SLOT_MIN * 60_000

/** A slot shows its highest minute: a limit that is passed for five minutes is passed. */
export function loadSlots(
  runs: readonly LoadRun[],
  { range, baseLoadW }: { readonly range: MsInterval; readonly baseLoadW: number },
): readonly LoadSlot[] {
  const expected = highestBySlot(loadSteps(runs, { range, baseLoadW, ends: 'expected' }), range)
  const longest = highestBySlot(loadSteps(runs, { range, baseLoadW, ends: 'longest' }), range)
  return expected.map((expectedW, slot) => ({ expectedW, longestW: longest[slot] ?? expectedW }))
}

function highestBySlot(steps: readonly LoadStep[], range: MsInterval): readonly number[] {
  const slots = Array.from({ length: Math.ceil((range.endsAtMs - range.startsAtMs) / SLOT_MS) }, () => 0)
  for (const step of steps) {
    const first = Math.floor((step.startsAtMs - range.startsAtMs) / SLOT_MS)
    const last = Math.ceil((step.endsAtMs - range.startsAtMs) / SLOT_MS)
    for (let slot = first; slot < last; slot++) slots[slot] = Math.max(slots[slot] ?? 0, step.loadW)
  }
  return slots.map(Math.round)
}
