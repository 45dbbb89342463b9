import { niceTicks, tickLabels } from './ticks'

export interface Box {
  left: number
  right: number
  top: number
  bottom: number
}

const TICK = 4

/** Axis along the bottom with ticks, their labels and what is measured, unit included. */
export function XAxis({
  box,
  scale,
  domain,
  label,
  about = Math.max(2, Math.floor((box.right - box.left) / 80)),
  ticks = niceTicks(domain[0], domain[1], about),
  labels = tickLabels(ticks),
  grid = false,
}: {
  box: Box
  scale: (value: number) => number
  domain: [number, number]
  label: string
  about?: number
  ticks?: readonly number[]
  labels?: readonly string[]
  grid?: boolean
}) {
  return (
    <g>
      <path d={`M${box.left} ${box.bottom}H${box.right}`} stroke="var(--edge)" fill="none" />
      {ticks.map((tick, at) => (
        <g key={tick} transform={`translate(${scale(tick)} ${box.bottom})`}>
          {grid ? <path d={`M0 0V${box.top - box.bottom}`} stroke="var(--line)" /> : null}
          <path d={`M0 0V${TICK}`} stroke="var(--edge)" />
          <text y={TICK + 13} textAnchor="middle" fill="var(--mute)">
            {labels[at]}
          </text>
        </g>
      ))}
      <text x={(box.left + box.right) / 2} y={box.bottom + 37} textAnchor="middle" fill="var(--text)">
        {label}
      </text>
    </g>
  )
}

/** Axis at the left. Its label stands above it, level, so that nobody bends the head and a phone has room for the plot. */
export function YAxis({
  box,
  scale,
  domain,
  label,
  about = Math.max(2, Math.floor((box.bottom - box.top) / 45)),
  ticks = niceTicks(domain[0], domain[1], about),
}: {
  box: Box
  scale: (value: number) => number
  domain: [number, number]
  label: string
  about?: number
  ticks?: readonly number[]
}) {
  const labels = tickLabels(ticks)
  return (
    <g>
      {ticks.map((tick, at) => (
        <g key={tick} transform={`translate(${box.left} ${scale(tick)})`}>
          <path d={`M0 0H${box.right - box.left}`} stroke="var(--line)" />
          <path d={`M${-TICK} 0H0`} stroke="var(--edge)" />
          <text x={-TICK - 4} dy="0.35em" textAnchor="end" fill="var(--mute)">
            {labels[at]}
          </text>
        </g>
      ))}
      <path d={`M${box.left} ${box.top}V${box.bottom}`} stroke="var(--edge)" fill="none" />
      <text x={0} y={box.top - 12} fill="var(--text)">
        {label}
      </text>
    </g>
  )
}
