'use client'

import type { ReactNode } from 'react'
import { XAxis, YAxis, type Box } from './axes'
import { fillOf, FillPatterns, isHatched, type Fill } from './fills'
import type { PlotTable } from './plot-file'
import { PlotFrame } from './plot-frame'
import { PlotMark } from './plot-mark'
import { labelEvery, linearScale, niceEnd, niceTicks } from './ticks'

export interface StackedBar {
  label: string
  /** in order of the parts, from the bottom */
  values: readonly number[]
  reading: string
}

const HEIGHT = 190
const LEGEND_ROW = 20

/** Stacked bars of counts. Parts are told apart by fill and order, not by colour alone. */
export function BarPlot({
  bars,
  parts,
  xLabel,
  yLabel,
  tools,
  ...frame
}: {
  title: string
  description: string
  fileName: string
  table: PlotTable
  bars: readonly StackedBar[]
  parts: readonly { label: string; fill: Fill }[]
  xLabel: string
  yLabel: string
  tools?: ReactNode
}) {
  const most = Math.max(0, ...bars.map(({ values }) => values.reduce((sum, value) => sum + value, 0)))
  const end = niceEnd(most)
  const draw = (width: number) => {
    const places = legendPlaces(parts, width)
    const top = 34 + places.rows * LEGEND_ROW
    const box: Box = { left: 52, right: width - 10, top, bottom: top + HEIGHT }
    const slot = (box.right - box.left) / Math.max(1, bars.length)
    const y = linearScale([0, end], [box.bottom, box.top])
    const every = labelEvery(bars.length, box.right - box.left, 58)
    const shown = bars.map((_, at) => at).filter((at) => at % every === 0)
    const x = (at: number) => box.left + slot * (at + 0.5)
    const barWidth = Math.max(1, Math.min(48, slot * 0.8))
    return {
      height: box.bottom + 46,
      content: (
        <>
          <FillPatterns />
          {parts.map(({ label, fill }, at) => (
            <g key={label} transform={`translate(${places.at[at].x} ${places.at[at].row * LEGEND_ROW})`}>
              <rect x={0} y={1} width={14} height={14} {...fillOf(fill)} stroke="var(--edge)" />
              <text x={20} y={12} fill="var(--text)">
                {label}
              </text>
            </g>
          ))}
          <YAxis box={box} scale={y} domain={[0, end]} label={yLabel} ticks={countTicks(end)} />
          {bars.map((bar, at) => {
            let from = 0
            return (
              <PlotMark key={bar.label} at={at} reading={bar.reading}>
                <rect x={x(at) - slot / 2} y={box.top} width={slot} height={box.bottom - box.top} fill="transparent" />
                {bar.values.map((value, part) => {
                  const [low, high] = [y(from), y(from + value)]
                  from += value
                  return value > 0 ? (
                    <rect
                      key={parts[part].label}
                      x={x(at) - barWidth / 2}
                      y={high}
                      width={barWidth}
                      height={low - high}
                      {...fillOf(parts[part].fill)}
                      stroke={isHatched(parts[part].fill) ? 'var(--edge)' : 'var(--page)'}
                      strokeWidth="0.75"
                    />
                  ) : null
                })}
              </PlotMark>
            )
          })}
          <XAxis
            box={box}
            scale={x}
            domain={[0, bars.length - 1]}
            label={xLabel}
            ticks={shown}
            labels={shown.map((at) => bars[at].label)}
          />
        </>
      ),
    }
  }
  return <PlotFrame {...frame} tools={tools} draw={draw} what="bar" />
}

/** Of a count there is no half. */
const countTicks = (end: number): number[] => niceTicks(0, end, HEIGHT / 45).filter(Number.isInteger)

function legendPlaces(parts: readonly { label: string }[], width: number) {
  let x = 0
  let row = 0
  const at = parts.map(({ label }) => {
    const needs = 20 + label.length * 7 + 18
    if (x > 0 && x + needs > width) {
      x = 0
      row += 1
    }
    const place = { x, row }
    x += needs
    return place
  })
  return { at, rows: parts.length > 0 ? row + 1 : 0 }
}
