/** A finding and the lines of numbers behind it. */
import type { FlagKind } from '#db/enums.ts'
import type { Assumption } from '#db/queries/evaluation.ts'
import type { EvidenceLine, FlagEvidence, FlagSeverity } from '#db/queries/flag.ts'

export interface Finding {
  readonly kind: FlagKind
  readonly severity: FlagSeverity
  readonly summary: string
  readonly evidence: FlagEvidence
}

export const assumedLines = (assumptions: readonly Assumption[]): readonly EvidenceLine[] =>
  assumptions.map(({ name, value, from }) => ({ kind: 'assumed', label: name, value, from }))

export const found = (label: string, value: string): EvidenceLine => ({ kind: 'found', label, value, from: 'computed' })

/** For a unit whose records could not be computed; the others were. */
export const NOT_EVALUATED: Finding = {
  kind: 'not-evaluated',
  severity: 'attention',
  summary: 'Could not be computed: its records do not fit together',
  evidence: {
    shortfallMin: null,
    day: null,
    lines: [
      found('Result', 'none; its last figures stand'),
      {
        kind: 'fix',
        label: 'Look through its hardware record',
        value: 'save it again with the figures on the labels',
        from: 'common practice, no source',
      },
    ],
  },
}
