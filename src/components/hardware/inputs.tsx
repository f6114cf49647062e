/** Fields of the hardware form: a number that may be not known, a choice, and yes / no / not known. */
import { useId } from 'react'

interface Labelled {
  readonly label: string
  readonly problem?: string | undefined
}

const problemId = (id: string) => `${id}-problem`

function Problem({ id, problem }: { readonly id: string; readonly problem?: string | undefined }) {
  return problem ? (
    <span id={problemId(id)} className="text-small font-bold text-crimson">
      {problem}
    </span>
  ) : null
}

interface NumberFieldProps extends Labelled {
  readonly unit: string
  /** In SI; shown divided by `scale`. */
  readonly value: number | null
  readonly scale?: number
  readonly onChange: (value: number | null) => void
}

/** Empty is `null`: not known. */
export function NumberField({ label, unit, value, scale = 1, problem, onChange }: NumberFieldProps) {
  const id = useId()
  const shown = value === null ? '' : String(Number((value / scale).toPrecision(8)))
  return (
    <label htmlFor={id} className="flex flex-col gap-1">
      <span className="font-bold">
        {label}
        {unit && <span className="font-normal text-soft">, {unit}</span>}
      </span>
      <input
        id={id}
        className="field"
        type="number"
        step="any"
        inputMode="decimal"
        defaultValue={shown}
        aria-invalid={problem ? true : undefined}
        aria-describedby={problem ? problemId(id) : undefined}
        onChange={(event) => onChange(event.target.value === '' ? null : event.target.valueAsNumber * scale)}
      />
      <Problem id={id} problem={problem} />
    </label>
  )
}

interface TextFieldProps extends Labelled {
  readonly value: string
  readonly hint?: string
  readonly onChange: (value: string) => void
}

export function TextField({ label, value, hint, problem, onChange }: TextFieldProps) {
  const id = useId()
  return (
    <label htmlFor={id} className="flex flex-col gap-1">
      <span className="font-bold">{label}</span>
      <input
        id={id}
        className="field"
        defaultValue={value}
        aria-invalid={problem ? true : undefined}
        aria-describedby={problem ? problemId(id) : undefined}
        onChange={(event) => onChange(event.target.value)}
      />
      {hint && <span className="text-small text-soft">{hint}</span>}
      <Problem id={id} problem={problem} />
    </label>
  )
}

interface ChoiceFieldProps<Value extends string> extends Labelled {
  readonly value: Value
  readonly options: readonly (readonly [value: Value, label: string])[]
  readonly onChange: (value: Value) => void
}

export function ChoiceField<Value extends string>({ label, value, options, problem, onChange }: ChoiceFieldProps<Value>) {
  const id = useId()
  return (
    <label htmlFor={id} className="flex flex-col gap-1">
      <span className="font-bold">{label}</span>
      <select id={id} className="field" value={value} onChange={(event) => onChange(options[event.target.selectedIndex]?.[0] ?? value)}>
        {options.map(([one, words]) => (
          <option key={one} value={one}>
            {words}
          </option>
        ))}
      </select>
      <Problem id={id} problem={problem} />
    </label>
  )
}

interface KnownFieldProps extends Labelled {
  readonly value: boolean | null
  readonly onChange: (value: boolean | null) => void
}

const KNOWN = [
  ['unknown', 'not known'],
  ['yes', 'yes'],
  ['no', 'no'],
] as const

export function KnownField({ label, value, problem, onChange }: KnownFieldProps) {
  const word = value === null ? 'unknown' : value ? 'yes' : 'no'
  return (
    <ChoiceField
      label={label}
      value={word}
      options={KNOWN}
      problem={problem}
      onChange={(chosen) => onChange(chosen === 'unknown' ? null : chosen === 'yes')}
    />
  )
}
