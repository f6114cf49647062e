/** A day's events for a calendar: what to press and when, or from when the water is hot. Pure. */
import type { Evaluation } from '#db/queries/evaluation.ts'
import { needEndMin } from '#lib/core/tank/cycle.ts'
import type { NeedOutcome } from '#lib/core/tank/types.ts'
import { dayBounds } from '#lib/core/time/civil.ts'
import { MS_PER_MIN } from '#lib/core/units.ts'
import { zoneCity } from '#lib/format.ts'
import { tipOf } from '#lib/tip/tip.ts'

export interface FeedEvent {
  /** Stable: the day and the place in it. A start that moves is the same event, moved. */
  readonly key: string
  readonly startsAtMs: number
  /** Exclusive. */
  readonly endsAtMs: number
  readonly summary: string
  readonly description: string
  /** Whether somebody has something to do at its start. */
  readonly alarm: boolean
  readonly computedAtMs: number
}

interface DayCase {
  readonly evaluation: Evaluation
  /** Whether somebody presses, or a clock switches. */
  readonly pressed: boolean
  readonly zone: string
}

export function eventsOf({ evaluation, pressed, zone }: DayCase): readonly FeedEvent[] {
  const { startsAtMs } = dayBounds(evaluation.day, zone)
  const at = (minute: number) => startsAtMs + Math.round(minute) * MS_PER_MIN
  return together(evaluation.outcome.needs, pressed).map((needs, index) => {
    const tip = tipOf({ evaluation: { ...evaluation, outcome: { ...evaluation.outcome, needs } }, pressed, when: `(${zoneCity(zone)})` })
    const { startMin, endMin, toDo } = spanOf(needs, pressed)
    return {
      key: `${evaluation.day}-${index + 1}`,
      startsAtMs: at(startMin),
      endsAtMs: Math.max(at(endMin), at(startMin) + MS_PER_MIN),
      summary: tip.subject,
      description: [...(toDo ? [] : [tip.action]), ...tip.lines, tip.behind].filter(Boolean).join('\n'),
      alarm: toDo,
      computedAtMs: evaluation.evaluatedAtMs,
    }
  })
}

/** Showers of one press, or of one time from which the water is hot, are one event. */
function together(needs: readonly NeedOutcome[], pressed: boolean): readonly (readonly NeedOutcome[])[] {
  const groups: NeedOutcome[][] = []
  for (const need of needs) {
    const last = groups.at(-1)
    const { startMin } = spanOf([need], pressed)
    if (last && spanOf(last, pressed).startMin === startMin) last.push(need)
    else groups.push([need])
  }
  return groups
}

/** From the press to the end of its run; where nobody presses or nothing helps, from when the water is hot to the end of the shower. */
function spanOf(needs: readonly NeedOutcome[], pressed: boolean): { startMin: number; endMin: number; toDo: boolean } {
  const [first] = needs
  if (!first) return { startMin: 0, endMin: 0, toDo: false }
  if (pressed && first.startByMin !== null) {
    const runMin = first.run ? first.run.endMin - first.run.startMin : first.chosenRunMin
    return { startMin: first.startByMin, endMin: first.startByMin + runMin, toDo: true }
  }
  const endMin = Math.max(...needs.map(({ need }) => needEndMin(need)))
  return { startMin: first.readyAtMin ?? first.need.readyByMin, endMin, toDo: false }
}
