/** As things stand, the plan, and what the landlord made of it, side by side. */
import { compared, type Sides } from '#lib/plan/view.ts'

interface Props {
  readonly sides: Sides
  readonly isEdited: boolean
}

export function Comparison({ sides, isEdited }: Props) {
  return (
    <div className="overflow-x-auto" role="region" aria-label="Comparison" tabIndex={0}>
      <table className="plain-table max-w-[60rem]">
        <thead>
          <tr>
            <th scope="col">
              <span className="sr-only">Figure</span>
            </th>
            <th scope="col">As it stands</th>
            <th scope="col">The plan</th>
            {isEdited && <th scope="col">Yours</th>}
          </tr>
        </thead>
        <tbody>
          {compared(sides).map(({ label, today, plan, yours }) => (
            <tr key={label}>
              <th scope="row" className="font-normal text-soft">
                {label}
              </th>
              <td>{today}</td>
              <td className="font-bold">{plan}</td>
              {isEdited && <td className="font-bold">{yours}</td>}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  )
}
