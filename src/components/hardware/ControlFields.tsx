/** The low-voltage parts of a home-built timer: asked for only where there are any; empty is "not known". */
import type { ControlSupply } from '#lib/core/hardware/types.ts'
import { ChoiceField, NumberField } from './inputs.tsx'

interface Props {
  readonly control: ControlSupply | null
  readonly problemOf: (field: string) => string | undefined
  readonly onChange: (control: ControlSupply | null) => void
}

const UNKNOWN: ControlSupply = {
  transformerSecondaryV: null,
  transformerVa: null,
  transformerRegulationFraction: null,
  reservoirF: null,
  reservoirRatedV: null,
  coilRatedV: null,
  coilOhm: null,
  driver: null,
  suppression: null,
  primaryFuseA: null,
  loopLengthM: null,
  loopOhmPerKm: null,
}
const PRESENT = [
  ['no', 'no: a bought timer or contactor'],
  ['yes', 'yes: transformer, relay coil, driver'],
] as const
const SUPPRESSION = [
  ['unknown', 'not known'],
  ['none', 'none'],
  ['diode', 'plain diode'],
  ['diode-zener', 'diode and zener'],
  ['varistor', 'varistor'],
] as const

const NUMBERS = [
  ['transformerSecondaryV', 'Transformer secondary', 'V', 1],
  ['transformerVa', 'Transformer', 'VA', 1],
  ['transformerRegulationFraction', 'Transformer regulation', '%', 0.01],
  ['primaryFuseA', 'Primary fuse', 'mA', 1e-3],
  ['reservoirF', 'Reservoir capacitor', 'µF', 1e-6],
  ['reservoirRatedV', 'Reservoir rated', 'V', 1],
  ['coilRatedV', 'Relay coil', 'V', 1],
  ['coilOhm', 'Coil resistance', 'Ω', 1],
  ['loopLengthM', 'Control cable, one way', 'm', 1],
  ['loopOhmPerKm', 'Control wire, one conductor', 'Ω/km', 1],
] as const

export function ControlFields({ control, problemOf, onChange }: Props) {
  const set = (patch: Partial<ControlSupply>) => control && onChange({ ...control, ...patch })
  const driver = control?.driver ?? null
  const setDriver = (patch: Partial<NonNullable<ControlSupply['driver']>>) =>
    set({ driver: { maxCurrentA: 0.1, baseResistorOhm: null, gainMin: null, ...driver, ...patch } })
  return (
    <fieldset className="grid gap-4 sm:grid-cols-2">
      <legend className="mb-2 font-bold">Low-voltage parts of the timer</legend>
      <ChoiceField
        label="A home-built timer with a relay"
        value={control ? 'yes' : 'no'}
        options={PRESENT}
        onChange={(chosen) => onChange(chosen === 'yes' ? (control ?? UNKNOWN) : null)}
      />
      {control && (
        <>
          {NUMBERS.map(([name, label, unit, scale]) => (
            <NumberField
              key={name}
              label={label}
              unit={unit}
              scale={scale}
              value={control[name]}
              problem={problemOf(`installation.circuit.control.${name}`)}
              onChange={(value) => set({ [name]: value })}
            />
          ))}
          <NumberField
            label="Driver, highest current"
            unit="mA; empty = not known"
            scale={1e-3}
            value={driver?.maxCurrentA ?? null}
            problem={problemOf('installation.circuit.control.driver.maxCurrentA')}
            onChange={(value) => (value === null ? set({ driver: null }) : setDriver({ maxCurrentA: value }))}
          />
          {driver && (
            <>
              <NumberField
                label="Base resistor"
                unit="Ω"
                value={driver.baseResistorOhm}
                problem={problemOf('installation.circuit.control.driver.baseResistorOhm')}
                onChange={(baseResistorOhm) => setDriver({ baseResistorOhm })}
              />
              <NumberField
                label="Driver, least gain"
                unit=""
                value={driver.gainMin}
                problem={problemOf('installation.circuit.control.driver.gainMin')}
                onChange={(gainMin) => setDriver({ gainMin })}
              />
            </>
          )}
          <ChoiceField
            label="Across the coil"
            value={control.suppression ?? 'unknown'}
            options={SUPPRESSION}
            onChange={(chosen) => set({ suppression: chosen === 'unknown' ? null : chosen })}
          />
        </>
      )}
    </fieldset>
  )
}
