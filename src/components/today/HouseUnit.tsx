/** One unit of the house: its name, its state in words, its tank and its day; a link to the unit. */
import { memo, useMemo } from 'react'
import { cellState } from '#lib/today/cell-state.ts'
import type { House, HouseCell } from '#lib/today/types.ts'
import { DayStrip } from '../strip/DayStrip.tsx'
import { SignMark } from './SignMark.tsx'
import { Tank } from './Tank.tsx'

interface Props {
  readonly cell: HouseCell
  readonly house: House
  readonly minute: number
}

const STRIP_PX = 176
const HOT_SIGNS = ['short', 'hazard']

export function HouseUnit({ cell, house, minute }: Props) {
  const state = cellState(cell, minute, house.clockChange)
  const pressing = HOT_SIGNS.includes(state.sign)
  return (
    <a
      href={cell.href}
      className={`house-unit @container flex min-w-0 flex-col gap-1 border p-1.5 no-underline hover:underline ${pressing ? 'border-crimson outline outline-1 outline-crimson' : 'border-rule'} ${state.running ? 'bg-copper-wash' : 'bg-sheet'}`}
    >
      <span className="flex flex-wrap items-baseline justify-between gap-x-2">
        <span className="font-black">{cell.code}</span>
        <span className={`flex items-center gap-1 text-small ${wordsColour(state.sign, state.running)}`}>
          <span className="@min-[8.5rem]:hidden">
            <SignMark sign={state.sign} sizePx={10} />
          </span>
          {state.words}
        </span>
      </span>
      <span className="mt-auto hidden items-end gap-2 @min-[8.5rem]:flex">
        {state.chargePercent !== null && <Tank percent={state.chargePercent} />}
        <span className="min-w-0 max-w-66 grow">
          <UnitStrip cell={cell} house={house} />
        </span>
      </span>
      {state.chargePercent !== null && <span className="sr-only">, tank {state.chargePercent} % charged</span>}
    </a>
  )
}

/** The strip does not move with the pointer. */
const UnitStrip = memo(function UnitStrip({ cell, house }: Pick<Props, 'cell' | 'house'>) {
  const day = useMemo(
    () => ({ runs: cell.runs, needs: cell.needs, peaks: house.peaks, dayMin: house.dayMin, clockChange: house.clockChange }),
    [cell, house],
  )
  return <DayStrip day={day} widthPx={STRIP_PX} labels={false} role="decoration" />
})

/** On a copper wash, text is ink. */
function wordsColour(sign: string, running: boolean): string {
  if (running) return sign === 'short' || sign === 'hazard' ? 'font-bold text-ink' : 'text-ink'
  if (sign === 'short' || sign === 'hazard') return 'font-bold text-crimson'
  return sign === 'ready' ? 'text-verdigris' : 'text-soft'
}
