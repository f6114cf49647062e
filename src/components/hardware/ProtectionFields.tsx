/** What the circuit's checks ask besides its cable and contact: the nameplate's limit, the mains as read, and how the cable lies. */
import { useState } from 'react'
import type { Circuit } from '#lib/core/hardware/types.ts'
import { ChoiceField, KnownField, NumberField } from './inputs.tsx'

interface Props {
  readonly circuit: Circuit
  readonly problem: (field: string) => string | undefined
  readonly onChange: (patch: Partial<Circuit>) => void
}

const TERMINALS = [
  ['unknown', 'not known: counts as 60 °C'],
  ['60', '60 °C'],
  ['75', '75 °C'],
] as const

export function NameplateDevice({ circuit, problem, onChange }: Props) {
  return (
    <NumberField
      label="Largest device on the heater’s nameplate"
      unit="A; empty = none marked"
      value={circuit.markedMaxBreakerA ?? null}
      problem={problem('markedMaxBreakerA')}
      onChange={(markedMaxBreakerA) => onChange({ markedMaxBreakerA })}
    />
  )
}

/** Both ends or nothing: half a range decides no check, so it is kept here until the other end is entered. */
export function MainsRange({ circuit, problem, onChange }: Props) {
  const [lowestV, setLowestV] = useState(circuit.mainsRangeV?.lowestV ?? null)
  const [highestV, setHighestV] = useState(circuit.mainsRangeV?.highestV ?? null)
  const set = (lowest: number | null, highest: number | null) => {
    setLowestV(lowest)
    setHighestV(highest)
    onChange({ mainsRangeV: lowest === null || highest === null ? null : { lowestV: lowest, highestV: highest } })
  }
  return (
    <>
      <NumberField
        label="Mains, lowest reading"
        unit={lowestV === null && highestV !== null ? 'V; needed beside the highest' : 'V; empty = not read'}
        value={lowestV}
        problem={problem('mainsRangeV.lowestV')}
        onChange={(value) => set(value, highestV)}
      />
      <NumberField
        label="Mains, highest reading"
        unit={highestV === null && lowestV !== null ? 'V; needed beside the lowest' : 'V; empty = not read'}
        value={highestV}
        problem={problem('mainsRangeV.highestV')}
        onChange={(value) => set(lowestV, value)}
      />
    </>
  )
}

export function CableLies({ circuit, onChange }: Props) {
  return (
    <>
      {circuit.conductor?.system === 'awg' && (
        <ChoiceField
          label="Terminals marked for"
          value={circuit.terminalRatingC === 75 ? '75' : circuit.terminalRatingC === 60 ? '60' : 'unknown'}
          options={TERMINALS}
          onChange={(chosen) => onChange({ terminalRatingC: chosen === '75' ? 75 : chosen === '60' ? 60 : null })}
        />
      )}
      <KnownField
        label="More than 0.5 m inside thermal insulation"
        value={circuit.inThermalInsulation ?? null}
        onChange={(inThermalInsulation) => onChange({ inThermalInsulation })}
      />
    </>
  )
}
