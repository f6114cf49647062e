/** A unit's state as a shape: a bar runs, a notch is ready, a heavy box is short or dangerous. Decoration beside words. */
import type { Sign } from '#lib/today/cell-state.ts'

interface Props {
  readonly sign: Sign
  readonly sizePx?: number
}

export function SignMark({ sign, sizePx = 12 }: Props) {
  return (
    <svg viewBox="0 0 12 12" width={sizePx} height={sizePx} aria-hidden="true" className="inline-block shrink-0">
      {shapeOf(sign)}
    </svg>
  )
}

function shapeOf(sign: Sign) {
  switch (sign) {
    case 'running':
      return <rect x="0" y="3.5" width="12" height="5" fill="var(--copper)" />
    case 'ready':
      return <path d="M0 2H12L6 10Z" fill="var(--verdigris)" />
    case 'short':
      return (
        <g>
          <rect x="1.25" y="1.25" width="9.5" height="9.5" fill="none" stroke="var(--crimson)" strokeWidth="2.5" />
          <rect x="1" y="4.5" width="4" height="3" fill="var(--crimson)" />
        </g>
      )
    case 'hazard':
      return (
        <g>
          <rect x="0" y="0" width="12" height="12" fill="var(--crimson)" />
          <path d="M6 2V7M6 8.6V10.4" stroke="var(--sheet)" strokeWidth="1.8" />
        </g>
      )
    case 'waits':
      return <rect x="1" y="3" width="10" height="6" fill="none" stroke="var(--well)" strokeWidth="1.5" />
    case 'rests':
      return <path d="M1 6H11" stroke="var(--soft)" strokeWidth="1.5" />
    case 'nothing':
      return <path d="M3 3L9 9M9 3L3 9" stroke="var(--soft)" strokeWidth="1.2" />
  }
}
