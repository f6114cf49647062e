/** A unit's day in one sentence: what the strip shows, for whoever does not see it. */
import { clockWords } from './clock.ts'
import type { StripDay, StripNeed, StripRun } from './types.ts'

export function stripSentence(day: StripDay): string {
  const at = (minute: number) => clockWords(minute, day.clockChange)
  const runs = day.runs.map((run) => runWords(run, at))
  const needs = day.needs.map((need) => needWords(need, at))
  const peaks = day.peaks.map((peak) => `${at(peak.startMin)} to ${at(peak.endMin)}`)
  const parts = [
    runs.length > 0 ? `Runs ${listed(runs)}` : 'No run',
    needs.length > 0 ? needs.join('; ') : 'nobody wants hot water',
    ...(peaks.length > 0 ? [`on-peak ${listed(peaks)}`] : []),
  ]
  return `${parts.join('; ')}.`
}

function runWords(run: StripRun, at: (minute: number) => string): string {
  const words = `${at(run.startMin)} to ${at(run.endMin)}`
  if (run.longestEndMin === null) return `${words} and may never stop`
  return run.longestEndMin - run.endMin >= 1 ? `${words}, at the longest ${at(run.longestEndMin)}` : words
}

function needWords(need: StripNeed, at: (minute: number) => string): string {
  const showers = need.count === 1 ? `a shower of ${need.minutesEach} min` : `${need.count} showers of ${need.minutesEach} min`
  const wanted = `${showers} from ${at(need.readyByMin)}`
  if (need.shortfallMin > 0) return `${Math.ceil(need.shortfallMin)} min too short for ${wanted}`
  if (need.readyAtMin === null) return `not ready for ${wanted}`
  return `ready at ${at(Math.min(need.readyAtMin, need.readyByMin))} for ${wanted} until ${at(need.endMin)}`
}

const listed = (items: readonly string[]): string => items.join(' and ')
