/** How figures are said everywhere: local times with their zone, plain durations. */
import { TZDate } from '@date-fns/tz'
import { format } from 'date-fns'

export { counted, formatMinuteOfDay, formatMoney } from './figures.ts'

/** `Europe/London` -> `London`. */
export const zoneCity = (zone: string): string => (zone.split('/').at(-1) ?? zone).replaceAll('_', ' ')

/** "Tern House · Wednesday 2 December, 06:10 (London)". */
export const placeAndTime = (place: { readonly name: string; readonly zone: string }, instantMs: number): string =>
  `${place.name} · ${formatInstant(instantMs, place.zone, 'EEEE d MMMM, HH:mm')} (${zoneCity(place.zone)})`

/** An instant on the wall clock of a zone, by a date-fns pattern. */
export const formatInstant = (instantMs: number, zone: string, pattern: string): string => format(new TZDate(instantMs, zone), pattern)

/** A civil day, `2026-12-02`, by a date-fns pattern, e.g. "Wednesday 2 December". */
export const formatDay = (day: string, pattern = 'EEEE d MMMM'): string => format(new TZDate(`${day}T12:00:00Z`, 'UTC'), pattern)

/** "1 h 35 min", "50 min". */
export function formatDuration(durationMin: number): string {
  const minutes = Math.round(durationMin)
  const hours = Math.floor(minutes / 60)
  if (hours === 0) return `${minutes} min`
  return minutes % 60 === 0 ? `${hours} h` : `${hours} h ${minutes % 60} min`
}

export const formatEnergy = (energyKwh: number): string => `${energyKwh.toFixed(energyKwh < 100 ? 1 : 0)} kWh`
