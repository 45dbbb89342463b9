'use client'

import type { ReactNode } from 'react'
import { XAxis, YAxis, type Box } from './axes'
import type { PlotTable } from './plot-file'
import { PlotFrame } from './plot-frame'
import { PlotMark } from './plot-mark'
import { SERIES_COLOUR, SERIES_DASH, SeriesLegend, SeriesSymbol, Whisker, type SymbolForm } from './symbols'
import { linearScale } from './ticks'

export interface XyPoint {
  x: number
  y: number
  low: number | null
  high: number | null
  reading: string
  /** drawn beside the point */
  text?: string
}

export interface XySeries {
  form: SymbolForm
  label: string
  points: readonly XyPoint[]
  /** joins the points */
  lined?: boolean
  /** a finer line instead of joined points: [x, y] in order */
  path?: readonly (readonly [number, number])[]
}

export interface XyFrame {
  title: string
  description: string
  fileName: string
  table: PlotTable
}

/** Points with intervals over two axes, in one series or several. */
export function XyPlot({
  series,
  xDomain,
  yDomain,
  xLabel,
  yLabel,
  diagonal,
  height = 300,
  mostWidth = 760,
  square = false,
  ...frame
}: XyFrame & {
  series: readonly XySeries[]
  xDomain: [number, number]
  yDomain: [number, number]
  xLabel: string
  yLabel: string
  /** words of the line from corner to corner */
  diagonal?: string
  height?: number
  mostWidth?: number
  square?: boolean
}) {
  const draw = (available: number) => {
    const width = Math.min(available, mostWidth)
    const narrow = width < 520
    const legendRows = series.length > 1 ? (narrow ? series.length : 1) : 0
    const top = 30 + legendRows * 18 + (legendRows > 0 ? 6 : 0)
    const box: Box = { left: 44, right: width - 16, top, bottom: 0 }
    box.bottom = square ? top + (box.right - box.left) * 0.9 : top + height - 90
    const x = linearScale(xDomain, [box.left, box.right])
    const y = linearScale(yDomain, [box.bottom, box.top])
    // Points of two series at one place stand beside each other, so that no whisker hides another.
    const apart = (index: number) => (series.length > 1 ? (index * 2 - 1) * 2.5 : 0)
    let mark = 0
    return {
      width: width < available ? width : undefined,
      height: box.bottom + 46,
      content: (
        <>
          {legendRows > 0 ? (
            <SeriesLegend
              y={8}
              lined
              entries={series.map(({ form, label }, at) => ({
                form,
                label,
                at: narrow ? 0 : at * 300,
                row: narrow ? at : 0,
              }))}
            />
          ) : null}
          <YAxis box={box} scale={y} domain={yDomain} label={yLabel} />
          <XAxis box={box} scale={x} domain={xDomain} label={xLabel} />
          {diagonal ? <Diagonal box={box} words={diagonal} /> : null}
          {series.map((one, index) => (
            <g key={one.label}>
              <Line series={one} x={(value) => x(value) + apart(index)} y={y} />
              {one.points.map((point) => (
                <Point
                  key={`${point.x} ${point.y}`}
                  at={mark++}
                  end={xDomain[1]}
                  form={one.form}
                  point={point}
                  x={(value) => x(value) + apart(index)}
                  y={y}
                />
              ))}
            </g>
          ))}
        </>
      ),
    }
  }
  return <PlotFrame {...frame} draw={draw} />
}

function Diagonal({ box, words }: { box: Box; words: string }): ReactNode {
  const angle = (Math.atan2(box.top - box.bottom, box.right - box.left) * 180) / Math.PI
  return (
    <g>
      <path
        d={`M${box.left} ${box.bottom}L${box.right} ${box.top}`}
        stroke="var(--edge)"
        strokeDasharray="2 4"
        fill="none"
      />
      <text
        transform={`translate(${(box.left + box.right) / 2} ${(box.top + box.bottom) / 2}) rotate(${angle})`}
        y={16}
        textAnchor="middle"
        fill="var(--mute)"
      >
        {words}
      </text>
    </g>
  )
}

type Scale = (value: number) => number

function Line({ series, x, y }: { series: XySeries; x: Scale; y: Scale }): ReactNode {
  const places = series.path ?? (series.lined ? series.points.map((point) => [point.x, point.y] as const) : [])
  if (places.length < 2) return null
  return (
    <path
      d={places.map(([px, py], at) => `${at === 0 ? 'M' : 'L'}${x(px).toFixed(1)} ${y(py).toFixed(1)}`).join('')}
      stroke={SERIES_COLOUR[series.form]}
      strokeWidth="1.75"
      strokeDasharray={SERIES_DASH[series.form]}
      strokeLinejoin="round"
      fill="none"
    />
  )
}

function Point({
  at,
  form,
  point,
  x,
  y,
  end,
}: {
  at: number
  /** of the x axis: words near it stand at the left of their point */
  end: number
  form: SymbolForm
  point: XyPoint
  x: Scale
  y: Scale
}): ReactNode {
  return (
    <PlotMark at={at} reading={point.reading}>
      <circle cx={x(point.x)} cy={y(point.y)} r={12} fill="transparent" />
      {point.low !== null && point.high !== null ? (
        <Whisker form={form} from={y(point.low)} to={y(point.high)} at={x(point.x)} along="y" />
      ) : null}
      <SeriesSymbol form={form} x={x(point.x)} y={y(point.y)} />
      {point.text ? (
        <text
          x={x(point.x) + (point.x > 0.9 * end ? -9 : 9)}
          y={y(point.y) + (point.y < 0.1 ? -6 : 14)}
          textAnchor={point.x > 0.9 * end ? 'end' : 'start'}
          fontSize="11"
          fill="var(--mute)"
        >
          {point.text}
        </text>
      ) : null}
    </PlotMark>
  )
}
