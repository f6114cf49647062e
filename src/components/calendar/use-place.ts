/** Keeps the calendar's place in the address, so that it can be shared, reloaded and gone back from. */
import { useCallback, useEffect, useState } from 'react'
import { type CalendarPlace, readPlace, writePlace } from '#lib/calendar/schemas.ts'

export function usePlace(start: CalendarPlace): readonly [CalendarPlace, (change: Partial<CalendarPlace>) => void] {
  const [place, setPlace] = useState(() => readPlace(new URLSearchParams(window.location.search), start))
  useEffect(() => {
    const back = () => setPlace(readPlace(new URLSearchParams(window.location.search), start))
    window.addEventListener('popstate', back)
    return () => window.removeEventListener('popstate', back)
  }, [start])
  const move = useCallback(
    (change: Partial<CalendarPlace>) => {
      const next = { ...place, ...change }
      window.history.pushState(null, '', writePlace(next))
      setPlace(next)
    },
    [place],
  )
  return [place, move]
}
