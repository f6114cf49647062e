/**
 * The year ahead of a unit whose week repeats: the dates between which its runs no longer make it, because the mains are too cold.
 * Colder mains never make a week ready that warmer ones do not, so one temperature decides, and the calendar does the rest.
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

export interface Outlook {
  /** `all-year`: always makes it; `part`: in `spells` it does not; `never`: on no day. */
  readonly status: 'all-year' | 'part' | 'never' | 'no-need'
  /** Coldest mains that still work, to a tenth of a kelvin; `null` when every mains temperature of the year works, or none. */
  readonly limitInletC: number | null
  readonly spells: readonly ShortSpell[]
  readonly coldestInletC: number
  readonly warmestInletC: number
}

export interface OutlookCase {
  /** A week, or a day that repeats itself; its own mains temperature is not looked at. */
  readonly days: readonly UnitDay[]
  readonly climate: InletClimate
  /** First of 365 days; start a northern year in summer and its winter is one spell. */
  readonly fromDay: Day
}

const DAYS = 365
const RESOLUTION_K = 0.1

export function seasonOutlook({ days, climate, fromDay }: OutlookCase): Outlook {
  const dates = Array.from({ length: DAYS }, (_, index) => addDays(fromDay, index))
  const inlets = dates.map((date) => inletC(climate, date))
  const coldestInletC = Math.min(...inlets)
  const warmestInletC = Math.max(...inlets)
  const known = { coldestInletC, warmestInletC }
  if (days.every((day) => day.needs.length === 0)) return { ...known, status: 'no-need', limitInletC: null, spells: [] }
  if (makesIt(days, coldestInletC)) return { ...known, status: 'all-year', limitInletC: null, spells: [] }
  if (!makesIt(days, warmestInletC)) return { ...known, status: 'never', limitInletC: null, spells: spellsOf(dates, () => true) }
  let short = coldestInletC
  let enough = warmestInletC
  while (enough - short > RESOLUTION_K) {
    const middle = (short + enough) / 2
    if (makesIt(days, middle)) enough = middle
    else short = middle
  }
  return { ...known, status: 'part', limitInletC: enough, spells: spellsOf(dates, (index) => (inlets[index] ?? 0) < enough) }
}

const makesIt = (days: readonly UnitDay[], mainsC: number): boolean => servesWeek(days.map((day) => ({ ...day, inletC: mainsC })))

function spellsOf(days: readonly Day[], isShort: (index: number) => boolean): readonly ShortSpell[] {
  const spells: { firstDay: Day; lastDay: Day; days: number }[] = []
  days.forEach((day, index) => {
    if (!isShort(index)) return
    const last = spells.at(-1)
    if (last && index > 0 && last.lastDay === days[index - 1]) {
      last.lastDay = day
      last.days++
    } else spells.push({ firstDay: day, lastDay: day, days: 1 })
  })
  return spells
}
