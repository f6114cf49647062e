/** The building in elevation: floors from the top down, a cell a unit; small cells from 60 units, rows of floors from 300. */
import { cellState, type Sign } from '#lib/today/cell-state.ts'
import { counted } from '#lib/format.ts'
import { placeUnits } from '#lib/today/place-units.ts'
import type { House, HouseCell } from '#lib/today/types.ts'
import { useMemo } from 'react'
import { HouseUnit } from './HouseUnit.tsx'
import { SignMark } from './SignMark.tsx'

interface Props {
  readonly house: House
  readonly minute: number
}
export const SMALL_FROM = 60
export const ROWS_FROM = 300

export function HouseFloors({ house, minute }: Props) {
  const floors = useMemo(() => placeUnits(house.cells), [house.cells])
  const columns = floors[0]?.columns.length ?? 1
  const size = house.cells.length >= ROWS_FROM ? 'rows' : house.cells.length >= SMALL_FROM ? 'small' : 'large'
  if (size === 'rows') return <FloorRows house={house} minute={minute} />
  return (
    <ol className={`flex flex-col ${size === 'small' ? 'gap-0.5' : 'gap-1'}`}>
      {floors.map(({ floor, columns: units }, index) => (
        <li key={index} aria-label={floor === null ? undefined : floorWords(floor)}>
          <ul
            className={`grid ${size === 'small' ? 'gap-0.5' : 'gap-1'}`}
            style={{ gridTemplateColumns: `repeat(${columns}, minmax(0, 1fr))` }}
          >
            {units.map((cell, column) =>
              cell === null ? (
                <li key={column} aria-hidden="true" />
              ) : (
                <li key={cell.code} className="flex min-w-0 *:grow">
                  {size === 'small' ? (
                    <SmallUnit cell={cell} house={house} minute={minute} />
                  ) : (
                    <HouseUnit cell={cell} house={house} minute={minute} />
                  )}
                </li>
              ),
            )}
          </ul>
        </li>
      ))}
    </ol>
  )
}

const floorWords = (floor: number): string => (floor === 0 ? 'Ground floor' : `Floor ${floor}`)

function SmallUnit({ cell, house, minute }: Props & { readonly cell: HouseCell }) {
  const state = cellState(cell, minute, house.clockChange)
  const pressing = state.sign === 'short' || state.sign === 'hazard'
  return (
    <a
      href={cell.href}
      title={`${cell.code}: ${state.words}`}
      className={`flex min-h-8 min-w-0 flex-wrap items-center justify-between gap-x-1 border px-1 no-underline hover:underline ${pressing ? 'border-2 border-crimson' : 'border-rule'} ${state.running ? 'bg-copper-wash' : 'bg-sheet'}`}
    >
      <span className="truncate text-small font-black">{cell.code}</span>
      <SignMark sign={state.sign} />
      <span className="sr-only">{state.words}</span>
    </a>
  )
}

/** A floor in words, and its units that somebody must look at as links; the marks are a picture of the words. */
function FloorRows({ house, minute }: Props) {
  const floors = useMemo(() => placeUnits(house.cells), [house.cells])
  return (
    <ol className="flex flex-col">
      {floors.map(({ floor, columns }, index) => {
        const units = columns.filter((cell) => cell !== null).map((cell) => ({ cell, state: cellState(cell, minute, house.clockChange) }))
        const pressing = units.filter(({ state }) => state.sign === 'short' || state.sign === 'hazard')
        return (
          <li key={index} className="grid grid-cols-[5.5rem_1fr] items-start gap-x-3 gap-y-1 border-b border-rule py-1">
            <span className="text-small font-bold">{floor === null ? `${units[0]?.cell.code ?? ''} …` : floorWords(floor)}</span>
            <span className="min-w-0">
              <span className="flex flex-wrap gap-1" aria-hidden="true">
                {units.map(({ cell, state }) => (
                  <span key={cell.code} className={state.running ? 'bg-copper-wash' : ''}>
                    <SignMark sign={state.sign} sizePx={11} />
                  </span>
                ))}
              </span>
              <span className="block text-small text-soft">
                {floorSummary(units.map(({ state }) => state))}
                {pressing.map(({ cell, state }) => (
                  <a key={cell.code} href={cell.href} className="ml-2 inline-block font-bold text-crimson">
                    {cell.code} {state.words}
                  </a>
                ))}
              </span>
            </span>
          </li>
        )
      })}
    </ol>
  )
}

function floorSummary(states: readonly { readonly sign: Sign; readonly running: boolean }[]): string {
  const running = states.filter((state) => state.running).length
  const ready = states.filter((state) => state.sign === 'ready').length
  return [counted(states.length, 'unit'), running > 0 ? `${running} running` : '', ready > 0 ? `${ready} ready` : '']
    .filter(Boolean)
    .join(', ')
}
