/** A tenant's week of showers: its shape, its limits, and what is wrong with one in words. Plain, so that a phone loads no schema library for it. */
export interface Shower {
  /** Wall-clock minute of the local day at which the first shower starts. */
  readonly readyByMinuteOfDay: number
  readonly count: number
  readonly minutesEach: number
  readonly gapMin: number
  readonly flowLPerMin: number
  readonly useTemperatureC: number
}
/** Seven days, Monday first; each a list in order of time. */
export type Week = Shower[][]

export const SHOWER_LIMITS = { count: 8, minutesEach: 45, perDay: 4 } as const
/** WaterSense shower head, 2.0 US gal/min at 80 psi (EPA WaterSense specification for showerheads). */
export const DEFAULT_FLOW_L_PER_MIN = 7.6
/** 105 °F, the fixture use temperature of NREL's OCHRE model; 40 to 41 °C is common practice. */
export const DEFAULT_USE_TEMPERATURE_C = 40.6
export const DEFAULT_GAP_MIN = 5

interface Limit {
  readonly field: keyof Shower
  readonly min: number
  readonly max: number
  readonly whole?: true
  readonly below: string
  readonly above: string
}

const TIME = 'Choose a time of day.'
const GAP = 'The pause between showers is at most two hours.'
const LIMITS: readonly Limit[] = [
  { field: 'readyByMinuteOfDay', min: 0, max: 1_439, whole: true, below: TIME, above: TIME },
  {
    field: 'count',
    min: 1,
    max: SHOWER_LIMITS.count,
    whole: true,
    below: 'At least one shower.',
    above: `At most ${SHOWER_LIMITS.count} showers one after another.`,
  },
  {
    field: 'minutesEach',
    min: 1,
    max: SHOWER_LIMITS.minutesEach,
    below: 'A shower takes at least a minute.',
    above: `A shower takes at most ${SHOWER_LIMITS.minutesEach} minutes.`,
  },
  { field: 'gapMin', min: 0, max: 120, below: GAP, above: GAP },
  {
    field: 'flowLPerMin',
    min: 2,
    max: 25,
    below: 'The flow is at least 2 litres a minute.',
    above: 'The flow is at most 25 litres a minute.',
  },
  {
    field: 'useTemperatureC',
    min: 30,
    max: 48,
    below: 'A shower is at least 30 °C.',
    above: 'A shower is at most 48 °C: hotter water scalds.',
  },
]
const OVERLAP = 'Two times of one day overlap. Choose a later time, or make them one entry with more showers.'

export interface WeekProblem {
  readonly path: readonly (string | number)[]
  readonly message: string
}

/** All that is wrong, in order of the days; empty when nothing is. */
export const weekProblems = (week: Week): readonly WeekProblem[] =>
  week.flatMap((showers, day) => dayProblems(showers).map(({ path, message }) => ({ path: [day, ...path], message })))

function dayProblems(showers: readonly Shower[]): readonly WeekProblem[] {
  const many = showers.length > SHOWER_LIMITS.perDay ? [{ path: [], message: `At most ${SHOWER_LIMITS.perDay} times a day.` }] : []
  const limits = showers.flatMap((shower, index) =>
    showerProblems(shower).map(({ path, message }) => ({ path: [index, ...path], message })),
  )
  const overlaps = showers.flatMap((shower, index) => {
    const before = showers[index - 1]
    return before && shower.readyByMinuteOfDay < endMinuteOfDay(before) ? [{ path: [index, 'readyByMinuteOfDay'], message: OVERLAP }] : []
  })
  return [...many, ...limits, ...(limits.length === 0 ? overlaps : [])]
}

const showerProblems = (shower: Shower): readonly WeekProblem[] =>
  LIMITS.flatMap(({ field, min, max, whole, below, above }) => {
    const value = shower[field]
    const wrong = value > max ? above : value < min || (whole && !Number.isInteger(value)) ? below : null
    return wrong === null ? [] : [{ path: [field], message: wrong }]
  })

const endMinuteOfDay = ({ readyByMinuteOfDay, count, minutesEach, gapMin }: Shower): number =>
  readyByMinuteOfDay + count * minutesEach + (count - 1) * gapMin
