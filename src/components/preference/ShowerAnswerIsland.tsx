/** Says, while the tenant chooses, whether the heater can do it: the same core as the nightly evaluation, in the browser. */
import { useEffect, useMemo, useState } from 'react'
import { assessReadiness } from '#lib/core/tank/readiness.ts'
import type { Readiness, UnitDay } from '#lib/core/tank/types.ts'
import { formatMinuteOfDay } from '#lib/format.ts'
import { readWeekForm, type WeekForm, weekOf } from '#lib/preference/form-fields.ts'
import { weekSchema } from '#lib/preference/schemas.ts'

interface Props {
  readonly heater: Omit<UnitDay, 'needs'>
  /** The plain form that it listens to. */
  readonly formId: string
  readonly first: WeekForm
}

const MONDAY = 0
const SATURDAY = 5

export function ShowerAnswerIsland({ heater, formId, first }: Props) {
  const [form, setForm] = useState(first)
  useEffect(() => {
    const element = document.getElementById(formId)
    if (!(element instanceof HTMLFormElement)) return
    const read = () => {
      const fields = [...new FormData(element).entries()].flatMap(([name, value]) =>
        typeof value === 'string' ? [[name, value] as const] : [],
      )
      setForm(readWeekForm(Object.fromEntries(fields)))
    }
    // What was chosen before the script took over counts too.
    read()
    element.addEventListener('input', read)
    return () => element.removeEventListener('input', read)
  }, [formId])
  const answers = useMemo(() => answersOf(heater, form), [heater, form])
  return (
    <div className="sheet flex flex-col gap-2" role="status" aria-live="polite">
      {answers.map(([label, words, bad]) => (
        <p key={label} className={bad ? 'border-l-4 border-crimson pl-3' : ''}>
          <strong>{label}:</strong> {words}
        </p>
      ))}
    </div>
  )
}

function answersOf(heater: Omit<UnitDay, 'needs'>, form: WeekForm): readonly (readonly [label: string, words: string, bad: boolean])[] {
  const week = weekOf(form)
  const valid = weekSchema.safeParse(week)
  if (!valid.success) return [['Check', valid.error.issues[0]?.message ?? 'A figure is outside its limits.', true]]
  return (
    [
      ['Workdays', MONDAY],
      ['Weekend', SATURDAY],
    ] as const
  ).map(([label, day]) => {
    const needs = (week[day] ?? []).map(({ readyByMinuteOfDay, ...shower }) => ({ ...shower, readyByMin: readyByMinuteOfDay }))
    const readiness = assessReadiness({ ...heater, needs })
    return [
      label,
      wordsOf(readiness, heater.runs.kind === 'pressed'),
      readiness.status === 'short' || readiness.status === 'impossible',
    ] as const
  })
}

function wordsOf({ status, needs }: Readiness, pressed: boolean): string {
  if (status === 'no-need') return 'no shower.'
  return needs
    .map((need) => {
      const at = formatMinuteOfDay(need.need.readyByMin)
      const start = need.startByMin === null || !pressed ? '' : ` Press the timer by ${formatMinuteOfDay((need.startByMin + 1440) % 1440)}.`
      if (need.status === 'ready') return `works at ${at}.${start}`
      if (need.status === 'impossible') return need.reason
      const better =
        need.nextBestReadyByMin.length > 0
          ? ` Works at ${need.nextBestReadyByMin.map(formatMinuteOfDay).join(', ')}.`
          : ' A shorter or a single shower may work.'
      return `at ${at} the run is ${need.shortfallMin} min too short: warm for ${Math.floor(need.minutesServed)} of ${need.minutesWanted} minutes.${better}`
    })
    .join(' ')
}
