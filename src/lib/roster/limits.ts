/** Limits of a roster's cells that no other form has, and which column a limit of the hardware form belongs to. */
import type { ColumnName } from './columns.ts'

const UNIT_CODE_CHARACTERS = 30
/** Beside a unit's page stands the page that imports. */
const TAKEN_CODE = 'import'

/** Why a text cannot be a unit's code, or `null`; the code is part of the unit's address. */
export function unitCodeProblem(code: string): string | null {
  if (code === '' || code.length > UNIT_CODE_CHARACTERS) return `Enter a code of 1 to ${UNIT_CODE_CHARACTERS} characters.`
  if (!/^[\p{L}\p{N}][\p{L}\p{M}\p{N} ._-]*$/u.test(code))
    return 'A code begins with a letter or digit and holds letters, digits, spaces, points, hyphens and underscores.'
  return code.toLowerCase() === TAKEN_CODE ? 'This word is taken by the product. Choose another code.' : null
}

const PLACES: readonly (readonly [part: string, column: ColumnName])[] = [
  ['nominalVolumeL', 'litres'],
  ['ratedVoltageV', 'element_v'],
  ['upperElement', 'upper_w'],
  ['lowerElement', 'lower_w'],
  ['setPointC', 'set_point_c'],
  ['mixingValveC', 'mixing_valve_c'],
  ['loss', 'loss'],
  ['settingMin', 'minutes'],
  ['resistanceOhm', 'r_megohm'],
  ['resistanceToleranceFraction', 'r_tolerance_pct'],
  ['capacitanceF', 'c_microfarad'],
  ['capacitanceToleranceFraction', 'c_tolerance_pct'],
  ['toleranceFraction', 'tolerance_pct'],
  ['leakage', 'leakage'],
  ['supplyV', 'timer_v'],
  ['programme', 'programme'],
  ['windows', 'programme'],
  ['breakerA', 'breaker_a'],
  ['conductor', 'conductor'],
  ['contactRatingA', 'contact_a'],
]

export const columnOf = (path: string): ColumnName => PLACES.find(([part]) => path.includes(part))?.[1] ?? 'controller'
