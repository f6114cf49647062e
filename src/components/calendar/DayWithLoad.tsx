/** A day's column with the building's load upright at its right edge, on the same hours as the runs. */
import { type CSSProperties, type ReactNode, type Ref, use } from 'react'
import type { CalendarDay } from '#lib/calendar/types.ts'
import { wallMinute } from '#lib/calendar/view.ts'
import { dayOfDate } from '#lib/calendar/wall.ts'
import { SLOT_MIN } from '#lib/today/types.ts'
import { CalendarDataContext } from './data-context.ts'

/** What the library hands to a day's column; its type says less than it gives. */
interface Props {
  readonly date?: Date
  readonly className?: string
  readonly style?: CSSProperties
  readonly children?: ReactNode
  readonly ref?: Ref<HTMLDivElement>
}

export function DayWithLoad({ date, className, style, children, ref }: Props) {
  const data = use(CalendarDataContext)
  const day = data?.days.find((one) => date && one.day === dayOfDate(date))
  return (
    <div className={className} style={style} ref={ref}>
      {children}
      {day && data && <UprightLoad day={day} limitW={data.limitW} />}
    </div>
  )
}

const WIDTH = 100
const MINUTES = 1_440

function UprightLoad({ day, limitW }: { readonly day: CalendarDay; readonly limitW: number }) {
  const topW = Math.max(limitW * 1.1, ...day.slots.map((slot) => slot.longestW))
  const x = (loadW: number) => Math.round((loadW / topW) * WIDTH * 10) / 10
  // On clock-change days an hour of the wall clock is empty or holds two: the later one is drawn.
  const y = (slot: number) => Math.min(MINUTES, wallMinute(day, slot * SLOT_MIN))
  const path = (of: 'expectedW' | 'longestW') =>
    day.slots
      .map((slot, index) => `${index === 0 ? 'M0 0' : ''}L${x(slot[of])} ${y(index)}L${x(slot[of])} ${y(index) + SLOT_MIN}`)
      .join('') + `L0 ${MINUTES}Z`
  return (
    <svg className="calendar-load" viewBox={`0 0 ${WIDTH} ${MINUTES}`} preserveAspectRatio="none" aria-hidden="true">
      <path d={path('longestW')} fill="var(--copper-wash)" />
      <path d={path('expectedW')} fill="var(--copper)" />
      <path d={`M${x(limitW)} 0V${MINUTES}`} stroke="var(--ink)" strokeWidth="2" vectorEffect="non-scaling-stroke" />
    </svg>
  )
}
