/** The house: the building in elevation over its load curve; one pointer moves both through the day. Stands still without script. */
import { useState } from 'react'
import { clockWords } from '#lib/strip/clock.ts'
import { cellState } from '#lib/today/cell-state.ts'
import { counted } from '#lib/format.ts'
import { type House, SLOT_MIN } from '#lib/today/types.ts'
import { HouseFloors } from './HouseFloors.tsx'
import { LoadCurve } from './LoadCurve.tsx'

interface Props {
  readonly house: House
}

const kw = (powerW: number) => (powerW / 1_000).toFixed(powerW < 99_500 ? 1 : 0)

export default function HouseIsland({ house }: Props) {
  const [minute, setMinute] = useState(house.atMin)
  const running = house.cells.filter((cell) => cellState(cell, minute, house.clockChange).running).length
  const slot = house.slots[Math.min(house.slots.length - 1, Math.floor(minute / SLOT_MIN))]
  const time = clockWords(minute, house.clockChange)
  const said = `${time}: ${running === 0 ? 'no unit runs' : `${counted(running, 'unit')} ${running === 1 ? 'runs' : 'run'}`}, ${kw(slot?.expectedW ?? 0)} kW of ${kw(house.limitW)} kW`
  return (
    <section className="sheet" aria-label="The house">
      <h2>The house at {time}</h2>
      <p className="text-soft">{said.slice(time.length + 2)}.</p>
      <Roof />
      <HouseFloors house={house} minute={minute} />
      <div className="border-t-3 border-ink" aria-hidden="true" />
      <div className="mt-5">
        <LoadCurve house={house} minute={minute} said={said} onMove={setMinute} />
      </div>
      <p className="mt-2 text-small text-soft">
        Copper: load expected. Dashed: every run at its longest. Hatched: on-peak. Drag the pointer, or use the arrow keys, to move through
        the day.
      </p>
    </section>
  )
}

function Roof() {
  return (
    <svg viewBox="0 0 960 44" preserveAspectRatio="none" className="mb-1 mt-3 block h-8 w-full" aria-hidden="true">
      <path d="M1 44V26H340L480 3L620 26H959V44" fill="none" stroke="var(--ink)" strokeWidth="2.5" vectorEffect="non-scaling-stroke" />
    </svg>
  )
}
