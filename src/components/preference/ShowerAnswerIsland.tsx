/** Says, while the tenant chooses, whether the heater can do it and what it costs: the same core as the nightly evaluation, in the browser. */
import { useDeferredValue, useEffect, useMemo, useState } from 'react'
import { type Answer, answersOf, type Heater } from '#lib/preference/answers.ts'
import { readWeekForm, type WeekForm, weekOf } from '#lib/preference/form-fields.ts'
import { weekProblems } from '#lib/preference/week.ts'

interface Props {
  readonly heater: Heater
  /** The plain form that it listens to. */
  readonly formId: string
  readonly first: WeekForm
}

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
  // Typing stays quick while the model runs.
  const asked = useDeferredValue(form)
  const answers = useMemo(() => answersTo(heater, asked), [heater, asked])
  return (
    <div className="sheet flex flex-col gap-2" role="status" aria-live="polite">
      {answers.map(({ label, words, bad }) => (
        <p key={label} className={bad ? 'border-l-4 border-crimson pl-3' : ''}>
          <strong>{label}:</strong> {words}
        </p>
      ))}
    </div>
  )
}

function answersTo(heater: Heater, form: WeekForm): readonly Answer[] {
  const week = weekOf(form, null)
  const [problem] = weekProblems(week)
  return problem ? [{ label: 'Check', words: problem.message, bad: true }] : answersOf(heater, week)
}
