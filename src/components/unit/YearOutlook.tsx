/** The twelve months ahead as a band: short spells in heavy outline with their words, the rest plain. */
import type { Outlook } from '#lib/core/tank/outlook.ts'
import { addDays } from '#lib/core/time/civil.ts'
import { formatDay } from '#lib/format.ts'
import { outlookWords } from '#lib/unit/outlook-words.ts'

interface Props {
  readonly outlook: Outlook
  readonly fromDay: string
}

const WIDTH = 720
const DAYS = 365
const MS_PER_DAY = 86_400_000
const TOP = 6
const HEIGHT = 22

export function YearOutlook({ outlook, fromDay }: Props) {
  const x = (day: string) => (Math.round((Date.parse(day) - Date.parse(fromDay)) / MS_PER_DAY) / DAYS) * WIDTH
  const months = monthsFrom(fromDay)
  return (
    <figure className="flex flex-col gap-2">
      <svg viewBox={`0 0 ${WIDTH} 48`} role="img" aria-label={outlookWords(outlook)} className="h-auto w-full" fontSize="12">
        <rect x="0" y={TOP} width={WIDTH} height={HEIGHT} fill="var(--verdigris-wash)" stroke="var(--rule)" />
        {outlook.spells.map(({ firstDay, lastDay }) => (
          <rect
            key={firstDay}
            x={x(firstDay) + 1}
            y={TOP}
            width={Math.max(3, x(addDays(lastDay, 1)) - x(firstDay) - 2)}
            height={HEIGHT}
            fill="var(--crimson-wash)"
            stroke="var(--crimson)"
            strokeWidth="3"
          />
        ))}
        {months.map((day) => (
          <g key={day}>
            <line x1={x(day)} x2={x(day)} y1={TOP} y2={TOP + HEIGHT + 5} stroke="var(--soft)" />
            {x(day) < WIDTH - 28 && (
              <text x={x(day) + 4} y={TOP + HEIGHT + 16} fill="var(--soft)">
                {formatDay(day, 'MMM')}
              </text>
            )}
          </g>
        ))}
      </svg>
      <figcaption>{outlookWords(outlook)}</figcaption>
    </figure>
  )
}

function monthsFrom(fromDay: string): readonly string[] {
  const [year = 0, month = 1] = fromDay.split('-').map(Number)
  return Array.from({ length: 12 }, (_, index) => {
    const at = month + index
    return `${year + Math.floor(at / 12)}-${String((at % 12) + 1).padStart(2, '0')}-01`
  }).filter((day) => Date.parse(day) - Date.parse(fromDay) < DAYS * MS_PER_DAY)
}
