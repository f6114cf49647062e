/** Records what is installed: every check's verdict and the timer's real run as one types, computed in the browser by the same core. */
import { useMutation } from '@tanstack/react-query'
import { useEffect, useMemo, useState } from 'react'
import { describeController } from '#lib/core/controller/describe.ts'
import { runDuration } from '#lib/core/controller/run-duration.ts'
import { checkHardware } from '#lib/core/hardware/check-hardware.ts'
import type { Installation, ProfileId } from '#lib/core/hardware/types.ts'
import { ApiProblem, apiSend } from '#lib/http/client.ts'
import type { RecordHardwareInput } from '#lib/hardware/record-schema.ts'
import type { NeededRun } from '#lib/hardware/run-need.ts'
import { WithQueries } from '../ui/WithQueries.tsx'
import { CheckList } from './CheckList.tsx'
import { CircuitFields } from './CircuitFields.tsx'
import { ControllerFields } from './ControllerFields.tsx'
import { NumberField, TextField } from './inputs.tsx'
import { TankFields } from './TankFields.tsx'
import { TimerAdvice } from './TimerAdvice.tsx'

interface Props {
  readonly installation: Installation
  readonly expectedRevision: number
  readonly profile: ProfileId
  readonly submitUrl: string
  readonly submitLabel: string
  /** Where to go once it is recorded. */
  readonly doneHref: string
  readonly needed: NeededRun | null
}

function HardwareForm({ installation: first, expectedRevision, profile, submitUrl, submitLabel, doneHref, needed }: Props) {
  const [installation, setInstallation] = useState(first)
  const [reason, setReason] = useState('')
  const [measuredMin, setMeasuredMin] = useState<number | null>(null)
  // What is typed before the script has taken over would be lost, so nothing can be typed until then.
  const [ready, setReady] = useState(false)
  useEffect(() => setReady(true), [])
  const checks = useMemo(() => checkHardware(installation, profile), [installation, profile])
  const record = useMutation({
    mutationFn: () => apiSend('POST', submitUrl, { installation, reason, measuredMin, expectedRevision } satisfies RecordHardwareInput),
    onSuccess: () => window.location.assign(doneHref),
  })
  const problem = record.error instanceof ApiProblem ? record.error : null
  const problemOf = (field: string) => problem?.fields.find((one) => one.field === field)?.message
  return (
    <div className="grid gap-10 lg:grid-cols-[1fr_24rem]">
      <form
        className="flex flex-col gap-8"
        onSubmit={(event) => {
          event.preventDefault()
          record.mutate()
        }}
      >
        {record.error && (
          <div role="alert" className="border-l-4 border-crimson bg-sheet px-4 py-3">
            <p>{record.error.message}</p>
            <p className="text-soft">Nothing was recorded. What you entered is still here.</p>
          </div>
        )}
        <fieldset disabled={!ready} className="flex flex-col gap-8">
          <ControllerFields
            controller={installation.controller}
            problemOf={problemOf}
            onChange={(controller) => setInstallation({ ...installation, controller })}
          />
          <TankFields
            tank={installation.load.tank}
            supplyVoltageV={installation.circuit.supplyVoltageV}
            problemOf={problemOf}
            onChange={(tank) => setInstallation({ ...installation, load: { ...installation.load, tank } })}
          />
          <CircuitFields
            circuit={installation.circuit}
            problemOf={problemOf}
            onChange={(circuit) => setInstallation({ ...installation, circuit })}
          />
          <div className="grid gap-4 sm:grid-cols-2">
            <NumberField
              label="Stop-watch: one real run"
              unit="minutes; empty = not measured"
              value={measuredMin}
              problem={problemOf('measuredMin')}
              onChange={setMeasuredMin}
            />
            <TextField label="What was done and why" value={reason} problem={problemOf('reason')} onChange={setReason} />
          </div>
          <p>
            <button className="button button-main min-h-12" disabled={record.isPending}>
              {record.isPending ? 'Recording…' : submitLabel}
            </button>
          </p>
        </fieldset>
      </form>
      <aside className="flex flex-col gap-4" aria-label="What this comes to">
        <RealRun installation={installation} />
        <TimerAdvice controller={installation.controller} needed={needed} />
        <CheckList checks={checks} profile={profile} />
      </aside>
    </div>
  )
}

function RealRun({ installation }: { readonly installation: Installation }) {
  const { controller } = installation
  const duration = runDuration(controller, [])
  const hazard = duration.timesOut !== 'always'
  return (
    <section className={hazard ? 'border-l-4 border-crimson bg-sheet px-4 py-3' : 'ledger'} aria-live="polite">
      <h2>{describeController(controller)}</h2>
      {hazard && <p className="font-bold text-crimson">This timer may never stop. Isolate it until it is mended.</p>}
      {duration.nominalMin !== null && (
        <p>
          Counts on {Math.floor(duration.guaranteed.minMin)} min; at the longest{' '}
          {duration.guaranteed.maxMin === null ? 'it may never end' : `${Math.ceil(duration.guaranteed.maxMin)} min`}.
        </p>
      )}
      <p className="text-soft">{duration.reasons.join(' ')}</p>
    </section>
  )
}

export function HardwareFormIsland(props: Props) {
  return (
    <WithQueries>
      <HardwareForm {...props} />
    </WithQueries>
  )
}
