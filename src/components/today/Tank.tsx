/** A tank's charge: hot water stands on top, so it fills from the top. Decoration beside words. */
interface Props {
  readonly percent: number
}

const HEIGHT_PX = 32
const WIDTH_PX = 12

export function Tank({ percent }: Props) {
  const hotPx = ((HEIGHT_PX - 2) * percent) / 100
  return (
    <svg viewBox={`0 0 ${WIDTH_PX} ${HEIGHT_PX}`} width={WIDTH_PX} height={HEIGHT_PX} aria-hidden="true" className="shrink-0">
      <rect
        x="0.75"
        y="0.75"
        width={WIDTH_PX - 1.5}
        height={HEIGHT_PX - 1.5}
        fill="var(--well-wash)"
        stroke="var(--soft)"
        strokeWidth="1.5"
      />
      <rect x="1.5" y="1.5" width={WIDTH_PX - 3} height={Math.max(0, hotPx - 0.5)} fill="var(--copper)" />
    </svg>
  )
}
