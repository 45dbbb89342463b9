'use client'

import type { PlotTable } from './plot-file'
import { PlotFrame } from './plot-frame'
import { PlotMark } from './plot-mark'

export interface MatrixCell {
  row: number
  column: number
  /** 0 to 1 is brightness; below 0 is 0; null is not to be computed */
  value: number | null
  text: string
  /** rests on little: hatched, and its number muted */
  faint: boolean
  reading: string
}

const LEAST_CELL = 42
const MOST_CELL = 76

/** A square of pairs. Brightness follows the number, which stands in the cell. */
export function MatrixPlot({
  labels,
  cells,
  corner,
  ...frame
}: {
  title: string
  description: string
  fileName: string
  table: PlotTable
  labels: readonly string[]
  cells: readonly MatrixCell[]
  /** what the two halves show */
  corner: readonly string[]
}) {
  const longest = Math.max(0, ...labels.map((label) => label.length))
  const labelWidth = Math.min(120, longest * 7 + 12)
  const draw = (available: number) => {
    const sizeWith = (overhang: number) =>
      Math.max(LEAST_CELL, Math.min(MOST_CELL, (available - labelWidth - overhang) / Math.max(1, labels.length)))
    // Names stand level where they fit, else they lean, and the last one over the edge.
    const lean = longest * 7 > sizeWith(2)
    const overhang = lean ? longest * 5 : 2
    const size = sizeWith(overhang)
    const height = Math.min(size, 44)
    const head = lean ? 14 + longest * 5 : 22
    const top = corner.length * 17 + head + 4
    const width = labelWidth + size * labels.length + overhang
    return {
      width: width > available ? width : undefined,
      height: top + height * labels.length + 4,
      content: (
        <>
          <defs>
            <pattern id="plot-faint" width="6" height="6" patternUnits="userSpaceOnUse" patternTransform="rotate(45)">
              <path d="M0 0V6" stroke="var(--edge)" strokeWidth="1" strokeOpacity="0.45" />
            </pattern>
          </defs>
          {corner.map((line, at) => (
            <text key={line} x={0} y={12 + at * 17} fill="var(--mute)">
              {line}
            </text>
          ))}
          {labels.map((label, at) => (
            <g key={at} fill="var(--text)">
              <text
                transform={
                  lean
                    ? `translate(${labelWidth + size * (at + 0.5)} ${top - 6}) rotate(-40)`
                    : `translate(${labelWidth + size * (at + 0.5)} ${top - 8})`
                }
                textAnchor={lean ? 'start' : 'middle'}
              >
                {label}
              </text>
              <text x={labelWidth - 8} y={top + height * (at + 0.5)} dy="0.35em" textAnchor="end">
                {label}
              </text>
              <rect
                x={labelWidth + size * at + 1}
                y={top + height * at + 1}
                width={size - 2}
                height={height - 2}
                fill="var(--line)"
                fillOpacity="0.5"
              />
            </g>
          ))}
          {cells.map(({ row, column, value, text, faint, reading }, at) => {
            const place = {
              x: labelWidth + size * column + 1,
              y: top + height * row + 1,
              width: size - 2,
              height: height - 2,
            }
            return (
              <PlotMark key={`${row}-${column}`} at={at} reading={reading}>
                <rect {...place} fill="var(--page)" stroke="var(--line)" />
                {value !== null && !faint ? (
                  <rect {...place} fill="var(--grade-a)" fillOpacity={0.05 + 0.4 * Math.min(1, Math.max(0, value))} />
                ) : null}
                {faint ? <rect {...place} fill="url(#plot-faint)" /> : null}
                <text
                  x={place.x + place.width / 2}
                  y={place.y + place.height / 2}
                  dy="0.35em"
                  textAnchor="middle"
                  fill={faint || value === null ? 'var(--mute)' : 'var(--text)'}
                >
                  {text}
                </text>
              </PlotMark>
            )
          })}
        </>
      ),
    }
  }
  return <PlotFrame {...frame} draw={draw} what="pair" />
}
