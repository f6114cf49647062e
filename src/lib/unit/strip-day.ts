/** An evaluation as the day that the strip draws. */
import type { Evaluation } from '#db/queries/evaluation.ts'
import type { StripDay } from '#lib/strip/types.ts'
import { stripNeed } from '#lib/today/house-cells.ts'

export const stripDayOf = ({ outcome }: Pick<Evaluation, 'outcome'>): StripDay => ({
  runs: outcome.runs,
  needs: outcome.needs.map(stripNeed),
  peaks: outcome.peaks,
  dayMin: outcome.dayMin,
  clockChange: outcome.clockChange,
})
