/** The building's load over the day with the service limit and the peaks, and the pointer that moves the house. */
import { type KeyboardEvent, type PointerEvent, useMemo, useRef } from 'react'
import { clockWords } from '#lib/strip/clock.ts'
import { hatchPath } from '#lib/strip/hatch.ts'
import { type House, SLOT_MIN } from '#lib/today/types.ts'

interface Props {
  readonly house: House
  readonly minute: number
  readonly said: string
  readonly onMove: (minute: number) => void
}

const WIDTH = 960
const TOP = 30
const HEIGHT = 120
const STEP_MIN = 5

export function LoadCurve({ house, minute, said, onMove }: Props) {
  const box = useRef<HTMLDivElement>(null)
  const { dayMin, clockChange } = house
  const clamp = (value: number) => Math.min(dayMin - STEP_MIN, Math.max(0, Math.round(value / STEP_MIN) * STEP_MIN))
  const xPercent = (minute / dayMin) * 100

  const follow = (event: PointerEvent<HTMLDivElement>) => {
    const rect = box.current?.getBoundingClientRect()
    if (rect) onMove(clamp(((event.clientX - rect.left) / rect.width) * dayMin))
  }
  const press = (event: KeyboardEvent<HTMLDivElement>) => {
    const by = {
      ArrowRight: STEP_MIN,
      ArrowUp: STEP_MIN,
      ArrowLeft: -STEP_MIN,
      ArrowDown: -STEP_MIN,
      PageUp: 60,
      PageDown: -60,
      Home: -dayMin,
      End: dayMin,
    }[event.key]
    if (by === undefined) return
    event.preventDefault()
    onMove(clamp(minute + by))
  }

  return (
    <div
      ref={box}
      role="slider"
      tabIndex={0}
      aria-label="Time of day"
      aria-valuemin={0}
      aria-valuemax={dayMin - STEP_MIN}
      aria-valuenow={minute}
      aria-valuetext={said}
      className="relative cursor-ew-resize touch-pan-y select-none pt-7"
      onKeyDown={press}
      onPointerDown={(event) => {
        event.currentTarget.setPointerCapture(event.pointerId)
        follow(event)
      }}
      onPointerMove={(event) => event.currentTarget.hasPointerCapture(event.pointerId) && follow(event)}
    >
      <Picture house={house} />
      <div className="house-pointer pointer-events-none absolute inset-y-0 w-0" style={{ left: `${xPercent}%` }} aria-hidden="true">
        <span className={`absolute top-0 whitespace-nowrap font-black ${xPercent > 85 ? 'right-3' : 'left-3'}`}>
          {clockWords(minute, clockChange)}
        </span>
        <span className="absolute -left-2 top-1 border-x-8 border-t-12 border-x-transparent border-t-ink" />
        <span className="absolute -left-px bottom-0 top-4 w-0.5 bg-ink" />
      </div>
      <Hours house={house} />
    </div>
  )
}

function Picture({ house }: Pick<Props, 'house'>) {
  const { slots, limitW, dayMin, peaks } = house
  const x = (at: number) => (at / dayMin) * WIDTH
  const topW = Math.max(limitW * 1.12, ...slots.map((slot) => slot.longestW))
  const y = (loadW: number) => HEIGHT - (loadW / topW) * (HEIGHT - TOP) + 0
  const outline = useMemo(
    () =>
      slots
        .map(({ longestW }, slot) => `${slot === 0 ? 'M' : 'L'}${x(slot * SLOT_MIN)} ${y(longestW)}H${x((slot + 1) * SLOT_MIN)}`)
        .join(''),
    [house],
  )
  const area = useMemo(
    () => `M0 ${HEIGHT}` + slots.map(({ expectedW }, slot) => `V${y(expectedW)}H${x((slot + 1) * SLOT_MIN)}`).join('') + `V${HEIGHT}Z`,
    [house],
  )
  const limitY = y(limitW)
  return (
    <div className="relative">
      <svg viewBox={`0 0 ${WIDTH} ${HEIGHT}`} preserveAspectRatio="none" className="block h-32 w-full" aria-hidden="true">
        {peaks.map((peak) => (
          <g key={peak.startMin}>
            <rect x={x(peak.startMin)} y={0} width={x(peak.endMin) - x(peak.startMin)} height={HEIGHT} fill="var(--dusk-wash)" />
            <path
              d={hatchPath({ xPx: x(peak.startMin), yPx: 0, widthPx: x(peak.endMin) - x(peak.startMin), heightPx: HEIGHT }, 10)}
              stroke="var(--dusk)"
              strokeWidth="1.2"
              fill="none"
              vectorEffect="non-scaling-stroke"
            />
          </g>
        ))}
        <path d={area} fill="var(--copper)" />
        <path d={outline} fill="none" stroke="var(--ink)" strokeWidth="1" strokeDasharray="3 3" vectorEffect="non-scaling-stroke" />
        <path d={`M0 ${limitY}H${WIDTH}`} stroke="var(--ink)" strokeWidth="2" vectorEffect="non-scaling-stroke" />
        <path d={`M0 ${HEIGHT}H${WIDTH}`} stroke="var(--ink)" strokeWidth="2" vectorEffect="non-scaling-stroke" />
      </svg>
      <span
        className="absolute left-0 bg-sheet pr-2 text-small font-bold"
        style={{ top: `${(limitY / HEIGHT) * 100}%`, transform: 'translateY(-115%)' }}
      >
        service limit {(limitW / 1_000).toFixed(0)} kW
      </span>
    </div>
  )
}

function Hours({ house: { dayMin, clockChange } }: Pick<Props, 'house'>) {
  const hours = Array.from({ length: Math.floor(dayMin / 180) + 1 }, (_, index) => index * 180)
  return (
    <div className="relative h-5 text-small text-soft" aria-hidden="true">
      {hours.map((at) => (
        <span
          key={at}
          className={`absolute ${at === 0 ? '' : at === dayMin ? '-translate-x-full' : '-translate-x-1/2'}`}
          style={{ left: `${(at / dayMin) * 100}%` }}
        >
          {at === dayMin ? '24' : clockWords(at, clockChange).slice(0, 2)}
        </span>
      ))}
    </div>
  )
}
