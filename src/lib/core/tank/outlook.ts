/**
 * The year ahead of a unit whose week repeats: the dates between which its runs no longer make it, because the mains are too cold
 * or because its clock does not follow the clock change. Colder mains never make a week ready that warmer ones do not, so one
 * temperature for each standing of the clock decides, and the calendar does the rest.
 */
import { addDays } from '../time/civil.ts'
import type { Day } from '../time/types.ts'
import { inletC } from './inlet.ts'
import { servesWeek } from './serves-week.ts'
import type { InletClimate, UnitDay } from './types.ts'

/** Days on which the unit does not make it, first and last of them. */
export interface ShortSpell {
  readonly firstDay: Day
  readonly lastDay: Day
  readonly days: number
}

/** From which mains on a week is served. */
export type Limit = { readonly kind: 'always' } | { readonly kind: 'from'; readonly inletC: number } | { readonly kind: 'never' }

export interface Outlook {
  /** `all-year`: always makes it; `part`: in `spells` it does not; `never`: on no day. */
  readonly status: 'all-year' | 'part' | 'never' | 'no-need'
  /** With its clock as it is this week; inlets to a tenth of a kelvin. */
  readonly limit: Limit
  /** With its clock as the next change leaves it, until somebody resets it; `null` where that changes nothing. */
  readonly afterChange: Limit | null
  readonly spells: readonly ShortSpell[]
  readonly coldestInletC: number
  readonly warmestInletC: number
}

/** Days on which a switch that does not follow clock changes stands otherwise than this week, and the week that it then gives. */
export interface OtherClock {
  readonly days: readonly UnitDay[]
  /** Half-open. */
  readonly spans: readonly { readonly from: Day; readonly to: Day }[]
}

export interface OutlookCase {
  /** A week, or a day that repeats itself; its own mains temperature is not looked at. */
  readonly days: readonly UnitDay[]
  readonly otherClock: OtherClock | null
  readonly climate: InletClimate
  /** First of 365 days; start a northern year in summer and its winter is one spell. */
  readonly fromDay: Day
}

const DAYS = 365
const RESOLUTION_K = 0.1

export function seasonOutlook({ days, otherClock, climate, fromDay }: OutlookCase): Outlook {
  const dates = Array.from({ length: DAYS }, (_, index) => addDays(fromDay, index))
  const inlets = dates.map((date) => inletC(climate, date))
  const coldestInletC = Math.min(...inlets)
  const warmestInletC = Math.max(...inlets)
  const limit = limitOf(days, coldestInletC, warmestInletC)
  const afterChange = otherClock && limitOf(otherClock.days, coldestInletC, warmestInletC)
  const known = { limit, afterChange, coldestInletC, warmestInletC }
  if (days.every((day) => day.needs.length === 0)) return { ...known, status: 'no-need', spells: [] }
  const isOther = (date: Day): boolean => otherClock?.spans.some(({ from, to }) => from <= date && date < to) ?? false
  const short = dates.map((date, index) => {
    const own = afterChange && isOther(date) ? afterChange : limit
    return own.kind === 'never' || (own.kind === 'from' && (inlets[index] ?? 0) < own.inletC)
  })
  const status = short.every(Boolean) ? 'never' : short.some(Boolean) ? 'part' : 'all-year'
  return { ...known, status, spells: spellsOf(dates, short) }
}

function limitOf(days: readonly UnitDay[], coldestC: number, warmestC: number): Limit {
  if (makesIt(days, coldestC)) return { kind: 'always' }
  if (!makesIt(days, warmestC)) return { kind: 'never' }
  let short = coldestC
  let enough = warmestC
  while (enough - short > RESOLUTION_K) {
    const middle = (short + enough) / 2
    if (makesIt(days, middle)) enough = middle
    else short = middle
  }
  return { kind: 'from', inletC: enough }
}

const makesIt = (days: readonly UnitDay[], mainsC: number): boolean => servesWeek(days.map((day) => ({ ...day, inletC: mainsC })))

function spellsOf(days: readonly Day[], short: readonly boolean[]): readonly ShortSpell[] {
  const spells: { firstDay: Day; lastDay: Day; days: number }[] = []
  days.forEach((day, index) => {
    if (!short[index]) return
    const last = spells.at(-1)
    if (last && index > 0 && last.lastDay === days[index - 1]) {
      last.lastDay = day
      last.days++
    } else spells.push({ firstDay: day, lastDay: day, days: 1 })
  })
  return spells
}
