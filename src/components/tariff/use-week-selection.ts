/** Where the reader of the week grid stands and what is selected: arrow keys move, shift extends, a drag selects and then paints. */
import { type KeyboardEvent, type PointerEvent, useRef, useState } from 'react'
import { LETTERS } from '#lib/tariff/draft.ts'
import { between, type Rectangle } from '#lib/tariff/paint.ts'

export interface Cell {
  readonly column: number
  readonly slot: number
}
interface Week {
  readonly columns: number
  readonly slots: number
  readonly periods: number
  /** Without a period: with the one chosen. */
  readonly onPaint: (area: Rectangle, period?: number) => void
  readonly onUndo: () => void
}

const clamp = (value: number, end: number): number => Math.max(0, Math.min(end - 1, value))

export function useWeekSelection({ columns, slots, periods, onPaint, onUndo }: Week) {
  const grid = useRef<HTMLTableElement>(null)
  const [anchor, setAnchor] = useState<Cell>({ column: 0, slot: 0 })
  const [active, setActive] = useState<Cell>({ column: 0, slot: 0 })
  const isDragging = useRef(false)
  // Columns may have gone since: a day type or a season was taken away.
  const kept = (cell: Cell): Cell => ({ column: clamp(cell.column, columns), slot: clamp(cell.slot, slots) })
  const area = between(kept(anchor), kept(active))

  const moveTo = (cell: Cell, extend: boolean) => {
    const next = kept(cell)
    setActive(next)
    if (!extend) setAnchor(next)
    grid.current?.querySelector<HTMLElement>(`[data-cell="${next.column} ${next.slot}"]`)?.focus()
  }

  const onKeyDown = (event: KeyboardEvent) => {
    if (event.altKey) return
    if (event.ctrlKey || event.metaKey) {
      if (event.key.toLowerCase() !== 'z') return
      event.preventDefault()
      return onUndo()
    }
    const { column, slot } = kept(active)
    const perHour = Math.max(1, Math.round(slots / 24))
    const moves: Readonly<Record<string, Cell>> = {
      ArrowUp: { column, slot: slot - 1 },
      ArrowDown: { column, slot: slot + 1 },
      ArrowLeft: { column: column - 1, slot },
      ArrowRight: { column: column + 1, slot },
      Home: { column, slot: 0 },
      End: { column, slot: slots - 1 },
      PageUp: { column, slot: slot - 4 * perHour },
      PageDown: { column, slot: slot + 4 * perHour },
    }
    const to = moves[event.key]
    const period = event.key.length === 1 ? LETTERS.indexOf(event.key.toUpperCase()) : -1
    if (to) moveTo(to, event.shiftKey)
    else if (event.key === 'Escape') setAnchor(active)
    else if (event.key === ' ' || event.key === 'Enter') onPaint(area)
    else if (period >= 0 && period < periods) onPaint(area, period)
    else return
    event.preventDefault()
  }

  const cellUnder = (event: PointerEvent): Cell | null => {
    const found = document.elementFromPoint(event.clientX, event.clientY)?.closest<HTMLElement>('[data-cell]')
    const [column, slot] = (found?.dataset.cell ?? '').split(' ').map(Number)
    return column !== undefined && slot !== undefined && found ? { column, slot } : null
  }
  const pointer = {
    onPointerDown: (event: PointerEvent) => {
      const cell = cellUnder(event)
      if (!cell || event.button !== 0) return
      isDragging.current = true
      // A finger's moves scroll the page; it paints one cell at a tap. A mouse keeps the drag past the grid's edge.
      if (event.pointerType === 'mouse') event.currentTarget.setPointerCapture(event.pointerId)
      moveTo(cell, event.shiftKey)
      event.preventDefault()
    },
    onPointerMove: (event: PointerEvent) => {
      const cell = isDragging.current ? cellUnder(event) : null
      if (cell) setActive(cell)
    },
    onPointerUp: () => {
      if (isDragging.current) onPaint(area)
      isDragging.current = false
    },
    onPointerCancel: () => {
      isDragging.current = false
    },
  }
  return { grid, area, active: kept(active), onKeyDown, pointer }
}
