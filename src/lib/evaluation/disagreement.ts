/** A tenant who says "was cold" again and again about days that the model called ready: the model, or what was recorded, is wrong. Pure. */
import type { EvidenceLine } from '#db/queries/flag.ts'
import type { AnsweredDay } from '#db/queries/feedback.ts'
import { formatOhm } from '#lib/core/controller/describe.ts'
import type { HeatingElement, TankSpec } from '#lib/core/tank/types.ts'
import { counted, formatDay } from '#lib/format.ts'
import { bothC } from './assumptions.ts'
import { type Finding, found } from './evidence.ts'
import type { UnitHardware } from './types.ts'

/** Own choice, no source: one cold shower may be a long one or a late press; two of the last five are the heater. */
export const DISAGREEMENT = { coldAnswers: 2, ofLastAnswers: 5, lookBackDays: 28 } as const

/** Judged are days that were called ready with the hardware as it is recorded now: a mended heater starts afresh. */
export function disagreementFinding(hardware: UnitHardware, answers: readonly AnsweredDay[]): Finding | null {
  const judged = answers
    .filter((answer) => answer.evaluated?.status === 'ready' && answer.evaluated.hardwareRecordId === hardware.recordId)
    .sort((one, other) => (one.day < other.day ? 1 : -1))
    .slice(0, DISAGREEMENT.ofLastAnswers)
  const cold = judged.filter((answer) => answer.verdict === 'cold')
  if (cold.length < DISAGREEMENT.coldAnswers) return null
  return {
    kind: 'model-disagrees',
    severity: 'cold',
    summary: `Computed as ready, said to be cold on ${cold.length} of ${counted(judged.length, 'day')}`,
    evidence: {
      shortfallMin: null,
      day: cold[0]?.day ?? null,
      lines: [
        found('Said "was cold"', cold.map(({ day }) => formatDay(day, 'EEE d MMM')).join(', ')),
        found('Said "was hot"', `on ${counted(judged.length - cold.length, 'other day')} called ready`),
        {
          kind: 'limit',
          label: 'Raised from',
          value: `${DISAGREEMENT.coldAnswers} cold of the last ${DISAGREEMENT.ofLastAnswers} answers about ready days, within ${DISAGREEMENT.lookBackDays} days`,
          from: 'own rule, no source',
        },
        ...checksFirst(hardware.installation.load.tank),
        {
          kind: 'caution',
          label: 'Mains and hot water',
          value:
            'Isolate and lock off before opening a cover; licensed practice only, the adopted local code decides. Hot water scalds. Never bypass a thermostat, high-limit or relief valve.',
          from: 'common practice, no source',
        },
      ],
    },
  }
}

/** What explains it most often, in the order in which it is cheapest to look at. */
function checksFirst(tank: TankSpec): readonly EvidenceLine[] {
  const check = (label: string, value: string): EvidenceLine => ({ kind: 'fix', label, value, from: 'common practice, no source' })
  const elements = [
    { name: 'upper', element: tank.upperElement },
    { name: 'lower', element: tank.lowerElement },
  ].flatMap(({ name, element }) => (element ? [`${name} ${elementOhm(element)}`] : []))
  return [
    check(
      'Check the mixing valve first',
      tank.mixingValveC === null
        ? 'none is recorded: look for one, and for a tap or shower valve that lets cold water across'
        : `recorded at ${bothC(tank.mixingValveC)}: measure at the tap; a fouled valve mixes too cold`,
    ),
    check('Then the thermostat', `after a full run the hottest tap should be near ${bothC(tank.setPointC)}; the model assumes that`),
    check(
      'Then the elements',
      `resistance when isolated: ${elements.join(', ') || 'no element is recorded'}; open or far off, it is worn out`,
    ),
    check(
      'Then the share that is heated',
      `the model counts ${Math.round(tank.shareAboveUpperFraction * 100)} % of the tank above the upper element; a broken dip tube or a lower element position leaves less hot water`,
    ),
  ]
}

/** Ohm's law from the label: R = V² / P. */
const elementOhm = ({ ratedVoltageV, ratedPowerW }: HeatingElement): string => `about ${formatOhm(ratedVoltageV ** 2 / ratedPowerW)}`
