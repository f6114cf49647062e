/** The roster's columns: their names, what they mean, and what stands for them when they are empty. One list for import, export and help. */

export interface Column {
  readonly name: string
  readonly help: string
  readonly example: string
}

export const COLUMNS = [
  { name: 'unit', help: 'Code of the unit; the one column that must be filled', example: '2B' },
  { name: 'floor', help: 'Whole number, 0 = ground', example: '2' },
  { name: 'stack', help: 'Column of the building in which the unit stands', example: 'B' },
  { name: 'tenant', help: 'Name of who lives there', example: 'Ada Brackwater' },
  { name: 'email', help: 'Their e-mail; another address is another tenant', example: 'ada@tenants.example' },
  { name: 'from', help: 'First day of a new tenancy, 2026-12-01; empty = today', example: '2026-12-01' },
  { name: 'litres', help: 'Tank, nominal litres (or use gallons)', example: '151' },
  { name: 'gallons', help: 'Tank, nominal US gallons (or use litres)', example: '' },
  { name: 'lower_w', help: 'Lower element, watts', example: '4500' },
  { name: 'upper_w', help: 'Upper element, watts; empty = none', example: '4500' },
  { name: 'element_v', help: 'Rated volts of the elements; empty = the supply, shown as a default', example: '240' },
  { name: 'set_point_c', help: 'Thermostat, °C; empty = 60, shown as a default', example: '60' },
  { name: 'mixing_valve_c', help: 'Mixing valve, °C; empty = none', example: '49' },
  { name: 'loss', help: 'uef 0.92, ef 0.90, class C, 1.8 kwh, or 1.3 w/k; empty = class C, shown as a default', example: 'uef 0.92' },
  { name: 'controller', help: 'dial, one-shot, rc, switch or supplier', example: 'dial' },
  { name: 'minutes', help: 'Run of a dial or one-shot', example: '90' },
  { name: 'tolerance_pct', help: 'Of a dial or one-shot, %; empty = 10 or 5, shown as a default', example: '10' },
  { name: 'r_megohm', help: 'Timing resistor of an rc timer, megohm', example: '' },
  { name: 'r_tolerance_pct', help: 'Its tolerance, %; empty = 5, shown as a default', example: '' },
  { name: 'c_microfarad', help: 'Timing capacitor of an rc timer, microfarad', example: '' },
  { name: 'c_tolerance_pct', help: 'Its tolerance, %; empty = 20, shown as a default', example: '' },
  { name: 'leakage', help: 'Of that capacitor: 400 megohm, 0.2 ua, or electrolytic 25 v; empty = not known', example: '' },
  { name: 'timer_ic', help: 'Chip of an rc timer: bipolar or cmos', example: '' },
  { name: 'timer_v', help: 'Supply of an rc timer, V; empty = 12, shown as a default', example: '' },
  { name: 'programme', help: 'Hours of a switch or supplier: 05:00-06:30 daily; 17:00-18:00 Mon-Fri', example: '' },
  { name: 'breaker_a', help: 'Overcurrent device, A; empty = not known', example: '30' },
  { name: 'conductor', help: '10 awg or 2.5 mm2, copper unless aluminium is added; empty = not known', example: '10 awg' },
  { name: 'contact_a', help: 'Resistive or AC-1 rating of the contact, A; empty = not known', example: '30' },
  {
    name: 'showers',
    help: 'Time, how many, minutes each, days: 06:45 2x8 Mon-Fri; 08:30 1x10 Sat-Sun',
    example: '06:45 1x8 Mon-Fri; 08:30 1x8 Sat-Sun',
  },
] as const satisfies readonly Column[]

export type ColumnName = (typeof COLUMNS)[number]['name']

/** Forms carry at most 1 MiB; 2,000 units with every column filled come to about 0.5 MB. */
export const ROSTER_LIMITS = { rows: 3_000, bytes: 900 * 1024 } as const

/** A cell that a spreadsheet would run as a formula is written as text. */
export const safeCell = (value: string): string => (/^[=+\-@\t\r\n]/.test(value) && !/^-?\d+([.,]\d+)?$/.test(value) ? `'${value}` : value)

const quoted = (value: string): string => (/[",\n\r;\t]/.test(value) ? `"${value.replaceAll('"', '""')}"` : value)
export const csvLine = (cells: readonly string[]): string => `${cells.map((cell) => quoted(safeCell(cell))).join(',')}\r\n`

export const sampleRoster = (): string => csvLine(COLUMNS.map((column) => column.name)) + csvLine(COLUMNS.map((column) => column.example))
