/** The building's load over the hours of the lanes below: expected, at its longest, as it stands, with the limit and the peaks. */
import { memo } from 'react'
import type { Figures } from '#lib/plan/compare.ts'
import type { PlanDay, PlanDraft } from '#lib/plan/draft-plan.server.ts'
import { instantAt } from '#lib/plan/types.ts'
import { kw, peakWords } from '#lib/plan/view.ts'
import { clockAt } from '#lib/plan/words.ts'
import { hatchPath } from '#lib/strip/hatch.ts'
import { type Axis, hoursOf } from './axis.ts'

interface Props {
  readonly draft: PlanDraft
  readonly day: PlanDay
  readonly axis: Axis
  readonly today: Figures
  readonly shown: Figures
}

const WIDTH = 960
const HEIGHT = 150
const TOP = 26

export const LoadPicture = memo(function LoadPicture({ draft, day, axis, today, shown }: Props) {
  const slots = Array.from({ length: Math.max(0, axis.toSlot - axis.fromSlot) }, (_, index) => axis.fromSlot + index)
  const topKw = Math.max(shown.limitKw * 1.12, today.peakKw * 1.05, shown.peakKw * 1.05)
  const x = (instantMs: number) => (axis.percent(instantMs) / 100) * WIDTH
  const y = (loadKw: number) => HEIGHT - (loadKw / topKw) * (HEIGHT - TOP)
  const steps = (values: readonly number[]) =>
    slots.map((slot) => `V${y(values[slot] ?? 0).toFixed(1)}H${x(instantAt(draft.grid, slot + 1)).toFixed(1)}`).join('')
  const area = (values: readonly number[]) => `M0 ${HEIGHT}${steps(values)}V${HEIGHT}Z`
  const limitY = y(shown.limitKw)
  return (
    <figure aria-label="The building’s load">
      <div className="relative">
        <svg viewBox={`0 0 ${WIDTH} ${HEIGHT}`} preserveAspectRatio="none" className="block h-40 w-full bg-sheet" aria-hidden="true">
          {day.peaks.map((peak) => {
            const [from, to] = [x(day.startsAtMs + peak.startMin * 60_000), x(day.startsAtMs + peak.endMin * 60_000)]
            const box = { xPx: from, yPx: 0, widthPx: to - from, heightPx: HEIGHT }
            return (
              <g key={peak.startMin}>
                <rect x={from} y={0} width={Math.max(0, to - from)} height={HEIGHT} fill="var(--dusk-wash)" />
                <path d={hatchPath(box, 10)} stroke="var(--dusk)" strokeWidth="1.2" fill="none" vectorEffect="non-scaling-stroke" />
              </g>
            )
          })}
          <path d={area(shown.worstKw)} fill="var(--copper-wash)" />
          <path d={area(shown.expectedKw)} fill="var(--copper)" />
          <path
            d={`M0 ${HEIGHT}${steps(today.worstKw)}`}
            fill="none"
            stroke="var(--ink)"
            strokeWidth="1.2"
            strokeDasharray="4 3"
            vectorEffect="non-scaling-stroke"
          />
          <path d={`M0 ${limitY}H${WIDTH}`} stroke="var(--ink)" strokeWidth="2" vectorEffect="non-scaling-stroke" />
          <path d={`M0 ${HEIGHT}H${WIDTH}`} stroke="var(--ink)" strokeWidth="2" vectorEffect="non-scaling-stroke" />
        </svg>
        <span
          className="absolute left-0 bg-sheet pr-2 text-small font-bold"
          style={{ top: `${(limitY / HEIGHT) * 100}%`, transform: 'translateY(-110%)' }}
        >
          limit {kw(shown.limitKw)}
        </span>
      </div>
      <div className="relative h-5 text-small text-soft" aria-hidden="true">
        {hoursOf(axis).map((atMs) => {
          const at = axis.percent(atMs)
          const shift = at < 1 ? '' : at > 99 ? '-translate-x-full' : '-translate-x-1/2'
          return (
            <span key={atMs} className={`absolute ${shift}`} style={{ left: `${at}%` }}>
              {clockAt(atMs, draft.zone).slice(0, 2)}
            </span>
          )
        })}
      </div>
      <figcaption className="text-small text-soft">
        Solid: expected. Pale: every run at its longest; highest {peakWords(shown, draft)}. Dashed: as it stands, highest{' '}
        {peakWords(today, draft)}. Hatched: on-peak.
      </figcaption>
    </figure>
  )
})
