/** The second sentence of the first page: what is wrong, and how near the building comes to its limit. */
import type { FlagKind } from '#db/enums.ts'
import { counted } from '#lib/format.ts'

export interface SubCase {
  readonly cold: number
  readonly dangerous: readonly { readonly kind: FlagKind }[]
  /** Highest load of tomorrow as a share of what the service may carry, and its local time. */
  readonly busiest: { readonly fraction: number; readonly time: string } | null
  readonly computed: boolean
}

export function subSentence({ cold, dangerous, busiest, computed }: SubCase): string {
  if (!computed) return 'The nightly job does it; it also runs when a record changes.'
  const stops = dangerous.filter((flag) => flag.kind === 'may-never-stop').length
  const others = dangerous.length - stops
  const troubles = [
    cold > 0 ? `${counted(cold, 'unit')} ${cold === 1 ? 'runs' : 'run'} short` : '',
    stops > 0 ? `${counted(stops, 'timer')} may never stop` : '',
    others > 0 ? `${counted(others, 'other hazard')} ${others === 1 ? 'waits' : 'wait'}` : '',
  ].filter(Boolean)
  const first =
    troubles.length === 0
      ? 'Nothing is short and nothing is dangerous.'
      : `${troubles.join(', ')}.`.replace('other hazard', stops > 0 ? 'other hazard' : 'hazard')
  const second = busiest
    ? ` At the most the building comes to ${Math.round(busiest.fraction * 100)} % of its service limit, at ${busiest.time}.`
    : ''
  return first + second
}
