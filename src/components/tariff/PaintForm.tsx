/** Painting without a drag: from, to, on which days, with which period. */
import { useState } from 'react'
import { type Draft, type Layer, letterOf } from '#lib/tariff/draft.ts'
import { periodNamesOf } from '#lib/tariff/draft-shape.ts'
import { columnsOf, dayTypeWords, type Rectangle, slotCount, slotTime } from '#lib/tariff/paint.ts'

interface Props {
  readonly draft: Draft
  readonly layer: Layer
  readonly onPaint: (area: Rectangle, period: number) => void
}

export function PaintForm({ draft, layer, onPaint }: Props) {
  const columns = columnsOf(draft, layer)
  const slots = slotCount(draft)
  const [column, setColumn] = useState(0)
  const [from, setFrom] = useState(0)
  const [to, setTo] = useState(slots)
  const [period, setPeriod] = useState(0)
  const toSlot = Math.min(to, slots)
  const times = Array.from({ length: slots + 1 }, (_, slot) => slotTime(draft, slot))
  return (
    <form
      className="mt-3 flex flex-wrap items-end gap-3"
      onSubmit={(event) => {
        event.preventDefault()
        if (from < toSlot) onPaint({ fromColumn: column, toColumn: column + 1, fromSlot: from, toSlot }, period)
      }}
    >
      <Choice
        label="Days"
        value={column}
        onChoose={setColumn}
        options={columns.map(({ season, dayType }) => `${draft.seasons[season]?.name ?? ''}, ${dayTypeWords(dayType)}`)}
      />
      <Choice label="From" value={from} onChoose={setFrom} options={times.slice(0, -1)} />
      <Choice label="Until" value={toSlot - 1} onChoose={(slot) => setTo(slot + 1)} options={times.slice(1)} />
      <Choice
        label="Period"
        value={period}
        onChoose={setPeriod}
        options={periodNamesOf(draft, layer).map((name, index) => `${letterOf(index)} ${name}`)}
      />
      <button className="button">Paint</button>
      {from >= toSlot && <p className="text-small font-bold text-crimson">The end must be after the beginning.</p>}
    </form>
  )
}

interface ChoiceProps {
  readonly label: string
  readonly value: number
  readonly options: readonly string[]
  readonly onChoose: (index: number) => void
}

export const Choice = ({ label, value, options, onChoose }: ChoiceProps) => (
  <label className="flex flex-col gap-1">
    <span className="text-small">{label}</span>
    <select className="field w-auto max-w-72" value={value} onChange={(event) => onChoose(Number(event.target.value))}>
      {options.map((option, index) => (
        <option key={index} value={index}>
          {option}
        </option>
      ))}
    </select>
  </label>
)
