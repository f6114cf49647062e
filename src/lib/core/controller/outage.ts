/** What a power cut does to a controller: whether its clock is still right, and what happens to a run. */
import { MIN_PER_HOUR } from '../units.ts'
import type { Controller } from './types.ts'

export type OutageEffect =
  /** It goes on as before. */
  | { readonly status: 'keeps'; readonly reason: string }
  /** Its clock is wrong afterwards, until somebody sets it. */
  | { readonly status: 'set-clock'; readonly slowByMin: number; readonly reason: string }
  /** Whoever pressed must press again. */
  | { readonly status: 'run-lost'; readonly reason: string }
  /** The supplier's clock, or a reserve nobody wrote down: it may be either. */
  | { readonly status: 'not-known'; readonly reason: string }

export function afterOutage(controller: Controller, outageMin: number): OutageEffect {
  switch (controller.kind) {
    case 'time-switch':
      return switchAfterOutage(controller.powerReserveH, outageMin)
    case 'supplier-contactor':
      return { status: 'not-known', reason: 'Its hours are the supplier’s; ask whether their clock kept time.' }
    case 'one-shot-rc':
      return {
        status: 'run-lost',
        // Unless the chip's reset is held low as the supply rises (common practice, no source).
        reason: 'A run that was going is over: press again. It may also start by itself when power returns.',
      }
    case 'one-shot-fixed':
      return { status: 'run-lost', reason: 'A run that was going is over: press again.' }
    case 'dial':
      return { status: 'not-known', reason: 'A spring dial has run down in the meantime; a motor dial goes on where it stood.' }
  }
}

function switchAfterOutage(powerReserveH: number | null, outageMin: number): OutageEffect {
  if (powerReserveH === null)
    return {
      status: 'not-known',
      reason: `Its power reserve is not on record: without one a motor clock stands for the whole cut, and an electronic one loses the time.`,
    }
  const slowByMin = outageMin - powerReserveH * MIN_PER_HOUR
  if (slowByMin <= 0) return { status: 'keeps', reason: `Its reserve of ${powerReserveH} h outlasts the cut.` }
  return {
    status: 'set-clock',
    slowByMin,
    reason: `The cut outlasts its reserve of ${powerReserveH} h: a motor clock stands ${hours(slowByMin)} behind; an electronic one has lost the time.`,
  }
}

const hours = (minutes: number): string =>
  minutes < 2 * MIN_PER_HOUR ? `${Math.round(minutes)} min` : `${Number((minutes / MIN_PER_HOUR).toFixed(1))} h`
