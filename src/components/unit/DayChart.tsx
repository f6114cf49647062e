/** Temperatures of one day: outlet and coldest water, runs, showers and peaks; the same on the page and while one tries a change. */
import { CHART, type ChartDay, dayChart, hourly } from '#lib/unit/day-chart.ts'

interface Props {
  readonly day: ChartDay
  /** Names the chart; several may stand on one page. */
  readonly label: string
}

export function DayChart({ day, label }: Props) {
  const chart = dayChart(day)
  const { widthPx, heightPx, leftPx, rightPx } = CHART
  const right = widthPx - rightPx
  return (
    <figure className="flex min-w-0 flex-col gap-2">
      <svg
        viewBox={`0 0 ${widthPx} ${heightPx}`}
        role="img"
        aria-label={`${label}. ${chart.sentence}`}
        className="h-auto w-full"
        fontSize="12"
      >
        {chart.peaks.map((peak) => (
          <g key={peak.xPx}>
            <rect
              x={peak.xPx}
              y={chart.plotTopPx}
              width={peak.widthPx}
              height={chart.plotBottomPx - chart.plotTopPx}
              fill="var(--dusk-wash)"
              opacity="0.5"
            />
            <path d={peak.hatch} stroke="var(--dusk)" strokeWidth="1" opacity="0.55" />
            <text x={peak.xPx + 4} y={chart.plotTopPx - 8} fill="var(--dusk)">
              on-peak
            </text>
          </g>
        ))}
        {chart.grid.map(({ temperatureC, yPx }) => (
          <g key={temperatureC}>
            <line x1={leftPx} x2={right} y1={yPx} y2={yPx} stroke="var(--rule)" />
            <text x={leftPx - 6} y={yPx + 4} textAnchor="end" fill="var(--soft)">
              {temperatureC} °C
            </text>
          </g>
        ))}
        <line x1={leftPx} x2={right} y1={chart.setPoint.yPx} y2={chart.setPoint.yPx} stroke="var(--ink)" strokeDasharray="2 4" />
        <text x={right} y={chart.setPoint.yPx - 5} textAnchor="end" fill="var(--ink)">
          set to {Math.round(chart.setPoint.temperatureC)} °C
        </text>
        {chart.use && (
          <>
            <line x1={leftPx} x2={right} y1={chart.use.yPx} y2={chart.use.yPx} stroke="var(--well)" strokeDasharray="6 3" />
            <text x={right} y={chart.use.yPx - 5} textAnchor="end" fill="var(--well)">
              shower {Math.round(chart.use.temperatureC)} °C
            </text>
          </>
        )}
        <path d={chart.coldest} fill="none" stroke="var(--well)" strokeWidth="2" strokeDasharray="5 3" />
        <path d={chart.outlet} fill="none" stroke="var(--ink)" strokeWidth="2.5" />
        <line x1={leftPx} x2={right} y1={chart.plotBottomPx} y2={chart.plotBottomPx} stroke="var(--ink)" />
        {chart.runs.map((run) => (
          <g key={run.xPx}>
            {run.tail && (
              <rect x={run.tail.xPx} y={chart.track.yPx} width={run.tail.widthPx} height={chart.track.heightPx} fill="var(--copper-wash)" />
            )}
            <rect x={run.xPx} y={chart.track.yPx} width={run.widthPx} height={chart.track.heightPx} fill="var(--copper)" />
          </g>
        ))}
        {chart.showers.map((shower) => (
          <g key={shower.words}>
            <rect
              x={shower.xPx}
              y={chart.track.yPx - 2}
              width={Math.max(5, shower.widthPx)}
              height={chart.track.heightPx + 4}
              fill="var(--well-wash)"
              stroke={shower.served ? 'var(--well)' : 'var(--crimson)'}
              strokeWidth={shower.served ? 1.5 : 3}
            />
            <path
              d={`M${shower.xPx - 5} ${chart.plotBottomPx - 9}h10l-5 8z`}
              fill={shower.served ? 'var(--verdigris)' : 'var(--paper)'}
              stroke={shower.served ? 'var(--verdigris)' : 'var(--crimson)'}
              strokeWidth="2"
            />
          </g>
        ))}
        {chart.hours.map(({ xPx, text }) => (
          <text key={xPx} x={xPx} y={heightPx - 4} textAnchor="middle" fill="var(--soft)">
            {text}
          </text>
        ))}
      </svg>
      <figcaption className="text-small text-soft">
        Solid line: water at the outlet. Dashed: the coldest water in the tank. Copper bar: heating, its pale end what may still be on. Box
        with a notch: a shower, filled notch warm, open notch short. Hatched: on-peak.
      </figcaption>
      <details className="text-small">
        <summary className="cursor-pointer underline">The same in figures</summary>
        <p className="mt-1">{chart.sentence}</p>
        <table className="plain-table mt-1">
          <thead>
            <tr>
              <th scope="col">At</th>
              <th scope="col">Outlet</th>
              <th scope="col">Coldest</th>
            </tr>
          </thead>
          <tbody>
            {hourly(day).map((row) => (
              <tr key={row.at}>
                <td>{row.at}</td>
                <td>{row.outletC.toFixed(1)} °C</td>
                <td>{row.coldestC.toFixed(1)} °C</td>
              </tr>
            ))}
          </tbody>
        </table>
      </details>
    </figure>
  )
}
