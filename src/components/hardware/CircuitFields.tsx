/** What carries and protects the load; empty is "not known" and never counts as good. */
import type { ReactNode } from 'react'
import type { Circuit } from '#lib/core/hardware/types.ts'
import { ControlFields } from './ControlFields.tsx'
import { ChoiceField, KnownField, NumberField } from './inputs.tsx'
import { CableLies, MainsRange, NameplateDevice } from './ProtectionFields.tsx'

interface Props {
  readonly circuit: Circuit
  readonly problemOf: (field: string) => string | undefined
  readonly onChange: (circuit: Circuit) => void
}

const SIZES = [
  'unknown',
  '14 awg',
  '12 awg',
  '10 awg',
  '8 awg',
  '6 awg',
  '4 awg',
  '1 mm2',
  '1.5 mm2',
  '2.5 mm2',
  '4 mm2',
  '6 mm2',
  '10 mm2',
] as const
const CLASSES = [
  ['unknown', 'not known'],
  ['resistive', 'resistive'],
  ['ac-1', 'AC-1'],
  ['ac-3', 'AC-3'],
  ['general-use', 'general use'],
] as const
const POLES = [
  ['unknown', 'not known'],
  ['1', 'one'],
  ['2', 'two'],
] as const

/** Insulation ratings that the tables hold. */
const RATINGS = {
  awg: [
    ['60', '60 °C'],
    ['75', '75 °C'],
    ['90', '90 °C'],
  ],
  mm2: [['70', '70 °C']],
} as const
const MATERIALS = [
  ['copper', 'copper'],
  ['aluminium', 'aluminium'],
] as const

function conductorOf(size: (typeof SIZES)[number]): Circuit['conductor'] {
  const [value, system] = size.split(' ')
  if (!value || (system !== 'awg' && system !== 'mm2')) return null
  return { size: value, system, material: 'copper', ratingC: system === 'awg' ? 60 : 70 }
}

const ratingOf = (rating: string): 60 | 70 | 75 | 90 => (rating === '75' ? 75 : rating === '90' ? 90 : rating === '70' ? 70 : 60)

export function CircuitFields({ circuit, problemOf, onChange }: Props) {
  const set = (patch: Partial<Circuit>) => onChange({ ...circuit, ...patch })
  const problem = (field: string) => problemOf(`installation.circuit.${field}`)
  const size = SIZES.find((one) => one === `${circuit.conductor?.size ?? ''} ${circuit.conductor?.system ?? ''}`) ?? 'unknown'
  const later = { circuit, problem, onChange: set }
  return (
    <>
      <Group title="Supply and breaker">
        <NumberField
          label="Supply"
          unit="V"
          value={circuit.supplyVoltageV}
          problem={problem('supplyVoltageV')}
          onChange={(value) => set({ supplyVoltageV: value ?? 0 })}
        />
        <NumberField
          label="Breaker"
          unit="A"
          value={circuit.breakerA}
          problem={problem('breakerA')}
          onChange={(breakerA) => set({ breakerA })}
        />
        <MainsRange {...later} />
        <NameplateDevice {...later} />
      </Group>
      <Group title="Cable to the heater">
        <ChoiceField
          label="Conductor"
          value={size}
          options={SIZES.map((one) => [one, one === 'unknown' ? 'not known' : one.replace('mm2', 'mm²').replace('awg', 'AWG')] as const)}
          onChange={(chosen) => set({ conductor: conductorOf(chosen) })}
        />
        {circuit.conductor && (
          <>
            <ChoiceField
              label="Conductor is of"
              value={circuit.conductor.material}
              options={MATERIALS}
              onChange={(material) => circuit.conductor && set({ conductor: { ...circuit.conductor, material } })}
            />
            <ChoiceField
              label="Insulation rated for"
              value={String(circuit.conductor.ratingC)}
              options={RATINGS[circuit.conductor.system]}
              onChange={(rating) => circuit.conductor && set({ conductor: { ...circuit.conductor, ratingC: ratingOf(rating) } })}
            />
          </>
        )}
        <NumberField
          label="Cable length"
          unit="m"
          value={circuit.lengthM}
          problem={problem('lengthM')}
          onChange={(lengthM) => set({ lengthM })}
        />
        <NumberField
          label="Air around the cable"
          unit="°C, at the warmest"
          value={circuit.ambientC}
          problem={problem('ambientC')}
          onChange={(ambientC) => set({ ambientC })}
        />
        <NumberField
          label="Current-carrying conductors together"
          unit="with its own"
          value={circuit.groupedConductors}
          problem={problem('groupedConductors')}
          onChange={(groupedConductors) => set({ groupedConductors })}
        />
        <CableLies {...later} />
      </Group>
      <Group title="Contact of the timer">
        <NumberField
          label="Contact rating"
          unit="A"
          value={circuit.contactRatingA}
          problem={problem('contactRatingA')}
          onChange={(contactRatingA) => set({ contactRatingA })}
        />
        <ChoiceField
          label="Rating is for"
          value={circuit.contactRatingClass ?? 'unknown'}
          options={CLASSES}
          onChange={(chosen) => set({ contactRatingClass: chosen === 'unknown' ? null : chosen })}
        />
        <ChoiceField
          label="Poles switched"
          value={circuit.polesSwitched === 1 ? '1' : circuit.polesSwitched === 2 ? '2' : 'unknown'}
          options={POLES}
          onChange={(chosen) => set({ polesSwitched: chosen === '1' ? 1 : chosen === '2' ? 2 : null })}
        />
      </Group>
      <Group title="Safety, seen on the spot">
        <KnownField label="Isolator in sight" value={circuit.isolatorInSight} onChange={(isolatorInSight) => set({ isolatorInSight })} />
        <KnownField label="Relief valve fitted" value={circuit.reliefValve} onChange={(reliefValve) => set({ reliefValve })} />
        <KnownField label="Closed system" value={circuit.closedSystem} onChange={(closedSystem) => set({ closedSystem })} />
        <KnownField label="Expansion vessel" value={circuit.expansionVessel} onChange={(expansionVessel) => set({ expansionVessel })} />
        <KnownField
          label="Extra-low voltage kept apart from mains (yes where there is none)"
          value={circuit.extraLowVoltageSeparated}
          onChange={(extraLowVoltageSeparated) => set({ extraLowVoltageSeparated })}
        />
      </Group>
      <ControlFields control={circuit.control} problemOf={problemOf} onChange={(control) => set({ control })} />
    </>
  )
}

function Group({ title, children }: { readonly title: string; readonly children: ReactNode }) {
  return (
    <fieldset className="grid gap-4 sm:grid-cols-2">
      <legend className="mb-2 font-bold">{title}</legend>
      {children}
    </fieldset>
  )
}
