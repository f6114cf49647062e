/** The parts of a monostable: resistor, capacitor, chip, and how the capacitor leaks. */
import type { CapacitorLeakage, OneShotRcController } from '#lib/core/controller/types.ts'
import { ChoiceField, NumberField } from './inputs.tsx'

const LEAKAGES = [
  ['unknown', 'not known'],
  ['resistance', 'measured, as a resistance'],
  ['series', 'limit of its series'],
] as const
const SERIES = [
  ['electrolytic', 'electrolytic'],
  ['low-leakage', 'low-leakage electrolytic'],
  ['film-polypropylene', 'polypropylene film'],
  ['film-polyester', 'polyester film'],
] as const
const leakageOf = (kind: (typeof LEAKAGES)[number][0]): CapacitorLeakage =>
  kind === 'resistance'
    ? { kind, leakageOhm: 100e6 }
    : kind === 'series'
      ? { kind, series: 'electrolytic', ratedV: 25 }
      : { kind: 'unknown' }

interface RcProps {
  readonly timer: OneShotRcController
  readonly problem: (field: string) => string | undefined
  readonly onChange: (timer: OneShotRcController) => void
}

export function RcFields({ timer, problem, onChange }: RcProps) {
  const set = (patch: Partial<OneShotRcController>) => onChange({ ...timer, ...patch })
  const { leakage } = timer
  return (
    <>
      <NumberField
        label="Timing resistor"
        unit="MΩ"
        scale={1e6}
        value={timer.resistanceOhm}
        problem={problem('resistanceOhm')}
        onChange={(value) => set({ resistanceOhm: value ?? 0 })}
      />
      <NumberField
        label="its tolerance"
        unit="%"
        scale={0.01}
        value={timer.resistanceToleranceFraction}
        problem={problem('resistanceToleranceFraction')}
        onChange={(value) => set({ resistanceToleranceFraction: value ?? 0 })}
      />
      <NumberField
        label="Timing capacitor"
        unit="µF"
        scale={1e-6}
        value={timer.capacitanceF}
        problem={problem('capacitanceF')}
        onChange={(value) => set({ capacitanceF: value ?? 0 })}
      />
      <NumberField
        label="its tolerance"
        unit="%"
        scale={0.01}
        value={timer.capacitanceToleranceFraction}
        problem={problem('capacitanceToleranceFraction')}
        onChange={(value) => set({ capacitanceToleranceFraction: value ?? 0 })}
      />
      <NumberField
        label="Supply of the timer"
        unit="V"
        value={timer.supplyV}
        problem={problem('supplyV')}
        onChange={(value) => set({ supplyV: value ?? 0 })}
      />
      <ChoiceField
        label="Chip"
        value={timer.icFamily}
        options={
          [
            ['cmos', 'CMOS (TLC, ICM, TS, LMC)'],
            ['bipolar', 'bipolar (NE, SE, LM)'],
          ] as const
        }
        onChange={(icFamily) => set({ icFamily })}
      />
      <ChoiceField
        label="Capacitor leakage"
        value={leakage.kind === 'current' ? 'unknown' : leakage.kind}
        options={LEAKAGES}
        onChange={(kind) => set({ leakage: leakageOf(kind) })}
      />
      {leakage.kind === 'resistance' && (
        <NumberField
          label="Leakage"
          unit="MΩ"
          scale={1e6}
          value={leakage.leakageOhm}
          problem={problem('leakage.leakageOhm')}
          onChange={(value) => set({ leakage: { ...leakage, leakageOhm: value ?? 0 } })}
        />
      )}
      {leakage.kind === 'series' && (
        <>
          <ChoiceField
            label="Series"
            value={leakage.series}
            options={SERIES}
            onChange={(series) => set({ leakage: { ...leakage, series } })}
          />
          <NumberField
            label="Rated voltage"
            unit="V"
            value={leakage.ratedV}
            problem={problem('leakage.ratedV')}
            onChange={(value) => set({ leakage: { ...leakage, ratedV: value ?? 0 } })}
          />
        </>
      )}
    </>
  )
}
