/** What times the heater; each kind has its own fields. */
import { useState } from 'react'
import type { Controller } from '#lib/core/controller/types.ts'
import { formatProgramme, parseProgramme } from '#lib/roster/programme-text.ts'
import { ChoiceField, KnownField, NumberField, TextField } from './inputs.tsx'
import { RcFields } from './RcFields.tsx'

interface Props {
  readonly controller: Controller
  readonly problemOf: (field: string) => string | undefined
  readonly onChange: (controller: Controller) => void
}

const KINDS = [
  ['dial', 'dial timer'],
  ['one-shot-fixed', 'one-shot of fixed length'],
  ['one-shot-rc', 'one-shot with resistor and capacitor'],
  ['time-switch', 'time switch'],
  ['supplier-contactor', 'contactor switched by the supplier'],
] as const

/** What a newly chosen kind starts with; everything is asked for on the same screen. */
function blank(kind: Controller['kind']): Controller {
  switch (kind) {
    case 'dial':
      return { kind, settingMin: 60, scaleMaxMin: 120, toleranceFraction: 0.1 }
    case 'one-shot-fixed':
      return { kind, settingMin: 60, toleranceFraction: 0.05 }
    case 'one-shot-rc':
      return {
        kind,
        resistanceOhm: 8.2e6,
        resistanceToleranceFraction: 0.05,
        capacitanceF: 330e-6,
        capacitanceToleranceFraction: 0.2,
        supplyV: 12,
        icFamily: 'cmos',
        leakage: { kind: 'unknown' },
      }
    case 'time-switch':
      return {
        kind,
        stepMin: 15,
        programme: [{ weekday: null, onMin: 300, offMin: 420 }],
        followsClockChange: false,
        driftMin: 0,
        powerReserveH: null,
      }
    case 'supplier-contactor':
      return { kind, windows: [{ weekday: null, onMin: 0, offMin: 420 }] }
  }
}

export function ControllerFields({ controller, problemOf, onChange }: Props) {
  const problem = (field: string) => problemOf(`installation.controller.${field}`)
  return (
    <fieldset className="grid gap-4 sm:grid-cols-2">
      <legend className="mb-2 font-bold">Timer</legend>
      <ChoiceField label="Kind" value={controller.kind} options={KINDS} onChange={(kind) => onChange(blank(kind))} />
      <KindFields key={controller.kind} controller={controller} problem={problem} onChange={onChange} />
    </fieldset>
  )
}

interface KindProps {
  readonly controller: Controller
  readonly problem: (field: string) => string | undefined
  readonly onChange: (controller: Controller) => void
}

function KindFields({ controller, problem, onChange }: KindProps) {
  switch (controller.kind) {
    case 'dial':
      return (
        <>
          <NumberField
            label="Set to"
            unit="minutes"
            value={controller.settingMin}
            problem={problem('settingMin')}
            onChange={(value) => onChange({ ...controller, settingMin: value ?? 0 })}
          />
          <NumberField
            label="Scale ends at"
            unit="minutes"
            value={controller.scaleMaxMin}
            problem={problem('scaleMaxMin')}
            onChange={(value) => onChange({ ...controller, scaleMaxMin: value ?? 0 })}
          />
          <NumberField
            label="Tolerance"
            unit="%"
            value={controller.toleranceFraction}
            scale={0.01}
            problem={problem('toleranceFraction')}
            onChange={(value) => onChange({ ...controller, toleranceFraction: value ?? 0 })}
          />
        </>
      )
    case 'one-shot-fixed':
      return (
        <>
          <NumberField
            label="One run"
            unit="minutes"
            value={controller.settingMin}
            problem={problem('settingMin')}
            onChange={(value) => onChange({ ...controller, settingMin: value ?? 0 })}
          />
          <NumberField
            label="Tolerance"
            unit="%"
            value={controller.toleranceFraction}
            scale={0.01}
            problem={problem('toleranceFraction')}
            onChange={(value) => onChange({ ...controller, toleranceFraction: value ?? 0 })}
          />
        </>
      )
    case 'one-shot-rc':
      return <RcFields timer={controller} problem={problem} onChange={onChange} />
    case 'time-switch':
      return (
        <>
          <ProgrammeField
            label="Programme"
            steps={controller.programme}
            problem={problem('programme')}
            onChange={(programme) => onChange({ ...controller, programme })}
          />
          <NumberField
            label="Its clock is fast by"
            unit="minutes; slow = negative"
            value={controller.driftMin}
            problem={problem('driftMin')}
            onChange={(value) => onChange({ ...controller, driftMin: value ?? 0 })}
          />
          <NumberField
            label="Smallest step"
            unit="minutes"
            value={controller.stepMin}
            problem={problem('stepMin')}
            onChange={(value) => onChange({ ...controller, stepMin: value ?? 15 })}
          />
          <KnownField
            label="Follows the clock change by itself"
            value={controller.followsClockChange}
            onChange={(value) => onChange({ ...controller, followsClockChange: value ?? false })}
          />
          <NumberField
            label="Power reserve"
            unit="hours; empty = not known"
            value={controller.powerReserveH}
            problem={problem('powerReserveH')}
            onChange={(powerReserveH) => onChange({ ...controller, powerReserveH })}
          />
        </>
      )
    case 'supplier-contactor':
      return (
        <ProgrammeField
          label="Hours switched on"
          steps={controller.windows}
          problem={problem('windows')}
          onChange={(windows) => onChange({ ...controller, windows })}
        />
      )
  }
}

interface ProgrammeProps {
  readonly label: string
  readonly steps: Parameters<typeof formatProgramme>[0]
  readonly problem: string | undefined
  readonly onChange: (steps: Parameters<typeof formatProgramme>[0]) => void
}

function ProgrammeField({ label, steps, problem, onChange }: ProgrammeProps) {
  const [unread, setUnread] = useState<string | undefined>()
  const read = (text: string) => {
    const parsed = parseProgramme(text)
    setUnread(parsed.ok ? undefined : parsed.message)
    if (parsed.ok) onChange(parsed.value)
  }
  return (
    <TextField
      label={label}
      value={formatProgramme(steps)}
      hint="05:00-06:30 Mon-Fri; 17:00-18:00 daily"
      problem={unread ?? problem}
      onChange={read}
    />
  )
}
