/** A labelled number that may be half typed: what is no number is told at once and never saved as one. */
import { useId, useState } from 'react'

interface Props {
  readonly label: string
  readonly value: number
  readonly onChange: (value: number) => void
  readonly unit?: string
  readonly hideLabel?: boolean
}

export function NumberField({ label, value, onChange, unit, hideLabel = false }: Props) {
  const id = useId()
  const [typed, setTyped] = useState<string | null>(null)
  const shown = typed ?? (Number.isFinite(value) ? String(Number(value.toPrecision(10))) : '')
  return (
    <div className="flex flex-col gap-1">
      <label htmlFor={id} className={hideLabel ? 'sr-only' : 'text-small'}>
        {label}
      </label>
      <span className="flex items-center gap-2">
        <input
          id={id}
          className="field w-28"
          inputMode="decimal"
          value={shown}
          aria-invalid={Number.isFinite(value) ? undefined : true}
          onChange={(event) => {
            setTyped(event.target.value)
            onChange(numberOf(event.target.value))
          }}
          onBlur={() => Number.isFinite(value) && setTyped(null)}
        />
        {unit && <span className="text-small text-soft">{unit}</span>}
      </span>
    </div>
  )
}

/** A comma is read as the decimal point; emptiness is no number. */
const numberOf = (text: string): number => (text.trim() === '' ? Number.NaN : Number(text.trim().replace(',', '.')))
