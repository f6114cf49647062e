/** The week of every season as a grid to paint periods on, hours downwards: by mouse, by keyboard, or by the form below it. */
import { counted } from '#lib/figures.ts'
import { type Draft, type Layer, letterOf } from '#lib/tariff/draft.ts'
import { periodNamesOf } from '#lib/tariff/draft-shape.ts'
import { areaWords, columnsOf, dayTypesOf, dayTypeWords, periodAt, type Rectangle, slotCount, slotTime } from '#lib/tariff/paint.ts'
import { patternsOf } from '#lib/tariff/patterns.ts'
import { useWeekSelection } from './use-week-selection.ts'
import './week-grid.css'

interface Props {
  readonly draft: Draft
  readonly layer: Layer
  readonly onPaint: (area: Rectangle, period?: number) => void
  readonly onUndo: () => void
}

export function WeekGrid({ draft, layer, onPaint, onUndo }: Props) {
  const columns = columnsOf(draft, layer)
  const dayTypes = dayTypesOf(draft, layer)
  const slots = slotCount(draft)
  const names = periodNamesOf(draft, layer)
  const patterns = patternsOf(draft, layer)
  const { grid, area, active, onKeyDown, pointer } = useWeekSelection({
    columns: columns.length,
    slots,
    periods: names.length,
    onPaint,
    onUndo,
  })
  const isIn = (column: number, slot: number) =>
    column >= area.fromColumn && column < area.toColumn && slot >= area.fromSlot && slot < area.toSlot
  const perHour = Math.max(1, Math.round(slots / 24))
  return (
    <div>
      <div className="overflow-x-auto pb-1">
        <table
          ref={grid}
          role="grid"
          aria-multiselectable="true"
          aria-label={layer === 'energy' ? 'Energy periods of the week' : 'Demand periods of the week'}
          aria-describedby="week-grid-keys"
          className="week-grid"
          onKeyDown={onKeyDown}
          {...pointer}
        >
          <thead>
            <tr>
              <td />
              {draft.seasons.map((season, index) => (
                <th key={index} scope="colgroup" colSpan={dayTypes.length}>
                  {season.name || `Season ${index + 1}`}
                </th>
              ))}
            </tr>
            <tr>
              <td />
              {columns.map(({ season, dayType }) => (
                <th key={`${season} ${dayType}`} scope="col" className="max-w-24 font-normal">
                  {dayTypeWords(dayType)}
                </th>
              ))}
            </tr>
          </thead>
          <tbody>
            {Array.from({ length: slots }, (_, slot) => (
              <tr key={slot}>
                <th scope="row">
                  {slot % perHour === 0 ? slotTime(draft, slot) : <span className="sr-only">{slotTime(draft, slot)}</span>}
                </th>
                {columns.map((column, index) => {
                  const period = periodAt(draft, layer, column, slot)
                  const isHere = active.column === index && active.slot === slot
                  return (
                    <td
                      key={index}
                      role="gridcell"
                      data-cell={`${index} ${slot}`}
                      tabIndex={isHere ? 0 : -1}
                      aria-selected={isIn(index, slot)}
                      aria-label={`${draft.seasons[column.season]?.name ?? ''}, ${dayTypeWords(column.dayType)}, ${slotTime(draft, slot)} to ${slotTime(draft, slot + 1)}: ${letterOf(period)}, ${names[period] ?? ''}`}
                      className={`week-cell week-${patterns[period] ?? 'plain'} ${index % dayTypes.length === 0 && index > 0 ? 'week-cell-first' : ''}`}
                    >
                      <span>{letterOf(period)}</span>
                    </td>
                  )
                })}
              </tr>
            ))}
          </tbody>
        </table>
      </div>
      <p className="mt-1 text-small text-soft">
        Selected: {areaWords(draft, layer, area)}, {counted((area.toColumn - area.fromColumn) * (area.toSlot - area.fromSlot), 'cell')}.
      </p>
      <p id="week-grid-keys" className="text-small text-soft">
        Drag with the mouse to paint. By keyboard: arrows move, shift and arrows select, the period’s letter or space paints, Ctrl Z undoes.
      </p>
    </div>
  )
}
