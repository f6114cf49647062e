/** The tank and its elements. */
import type { LossRating, TankSpec } from '#lib/core/tank/types.ts'
import { ChoiceField, NumberField } from './inputs.tsx'

interface Props {
  readonly tank: TankSpec
  readonly supplyVoltageV: number
  readonly problemOf: (field: string) => string | undefined
  readonly onChange: (tank: TankSpec) => void
}

const LOSSES = [
  ['class', 'energy label class'],
  ['uef', 'UEF'],
  ['ef', 'EF'],
  ['kwh-per-day', 'kWh in 24 h'],
  ['ua', 'W/K'],
] as const
const CLASSES = ['A+', 'A', 'B', 'C', 'D', 'E', 'F'] as const

const lossOf = (kind: LossRating['kind']): LossRating => {
  switch (kind) {
    case 'class':
      return { kind, label: 'C' }
    case 'uef':
      return { kind, uef: 0.92, drawPattern: 'medium' }
    case 'ef':
      return { kind, ef: 0.9 }
    case 'kwh-per-day':
      return { kind, lossKwhPerDay: 1.8, testDeltaK: 45 }
    case 'ua':
      return { kind, lossWPerK: 1.3 }
  }
}

export function TankFields({ tank, supplyVoltageV, problemOf, onChange }: Props) {
  const set = (patch: Partial<TankSpec>) => onChange({ ...tank, ...patch })
  const problem = (field: string) => problemOf(`installation.load.tank.${field}`)
  const volts = (tank.lowerElement ?? tank.upperElement)?.ratedVoltageV ?? supplyVoltageV
  const element = (ratedPowerW: number | null) => (ratedPowerW === null ? null : { ratedPowerW, ratedVoltageV: volts })
  const withVolts = (ratedVoltageV: number | null) =>
    set({
      upperElement: tank.upperElement && ratedVoltageV ? { ...tank.upperElement, ratedVoltageV } : tank.upperElement,
      lowerElement: tank.lowerElement && ratedVoltageV ? { ...tank.lowerElement, ratedVoltageV } : tank.lowerElement,
    })
  return (
    <fieldset className="grid gap-4 sm:grid-cols-2">
      <legend className="mb-2 font-bold">Tank</legend>
      <NumberField
        label="Nominal volume"
        unit="litres"
        value={tank.nominalVolumeL}
        problem={problem('nominalVolumeL')}
        onChange={(value) => set({ nominalVolumeL: value ?? 0 })}
      />
      <NumberField
        label="Measured volume"
        unit="litres; empty = 90 % of nominal"
        value={tank.actualVolumeL}
        problem={problem('actualVolumeL')}
        onChange={(actualVolumeL) => set({ actualVolumeL })}
      />
      <NumberField
        label="Upper element"
        unit="W; empty = none"
        value={tank.upperElement?.ratedPowerW ?? null}
        problem={problem('upperElement.ratedPowerW')}
        onChange={(watts) => set({ upperElement: element(watts) })}
      />
      <NumberField
        label="Lower element"
        unit="W; empty = none"
        value={tank.lowerElement?.ratedPowerW ?? null}
        problem={problem('lowerElement') ?? problem('lowerElement.ratedPowerW')}
        onChange={(watts) => set({ lowerElement: element(watts) })}
      />
      <NumberField
        label="Rated voltage of the elements"
        unit="V"
        value={volts}
        problem={problem('lowerElement.ratedVoltageV')}
        onChange={withVolts}
      />
      <NumberField
        label="Set point"
        unit="°C"
        value={tank.setPointC}
        problem={problem('setPointC')}
        onChange={(value) => set({ setPointC: value ?? 0 })}
      />
      <NumberField
        label="Dead band"
        unit="K"
        value={tank.deadBandK}
        problem={problem('deadBandK')}
        onChange={(value) => set({ deadBandK: value ?? 0 })}
      />
      <NumberField
        label="Mixing valve"
        unit="°C; empty = none"
        value={tank.mixingValveC}
        problem={problem('mixingValveC')}
        onChange={(mixingValveC) => set({ mixingValveC })}
      />
      <ChoiceField
        label="Standing loss known as"
        value={tank.loss.kind}
        options={LOSSES}
        onChange={(kind) => set({ loss: lossOf(kind) })}
      />
      <LossFigure
        loss={tank.loss}
        problem={problem('loss.uef') ?? problem('loss.ef') ?? problem('loss.lossWPerK') ?? problem('loss.lossKwhPerDay')}
        onChange={(loss) => set({ loss })}
      />
    </fieldset>
  )
}

interface LossProps {
  readonly loss: LossRating
  readonly problem: string | undefined
  readonly onChange: (loss: LossRating) => void
}

function LossFigure({ loss, problem, onChange }: LossProps) {
  switch (loss.kind) {
    case 'class':
      return (
        <ChoiceField
          label="Class"
          value={loss.label}
          options={CLASSES.map((label) => [label, label] as const)}
          onChange={(label) => onChange({ ...loss, label })}
        />
      )
    case 'uef':
      return (
        <NumberField
          key="uef"
          label="UEF"
          unit=""
          value={loss.uef}
          problem={problem}
          onChange={(value) => onChange({ ...loss, uef: value ?? 0 })}
        />
      )
    case 'ef':
      return (
        <NumberField
          key="ef"
          label="EF"
          unit=""
          value={loss.ef}
          problem={problem}
          onChange={(value) => onChange({ ...loss, ef: value ?? 0 })}
        />
      )
    case 'kwh-per-day':
      return (
        <NumberField
          key="kwh"
          label="Loss"
          unit="kWh in 24 h"
          value={loss.lossKwhPerDay}
          problem={problem}
          onChange={(value) => onChange({ ...loss, lossKwhPerDay: value ?? 0 })}
        />
      )
    case 'ua':
      return (
        <NumberField
          key="ua"
          label="Loss"
          unit="W/K"
          value={loss.lossWPerK}
          problem={problem}
          onChange={(value) => onChange({ ...loss, lossWPerK: value ?? 0 })}
        />
      )
  }
}
