'use client'

import { XAxis, type Box } from './axes'
import type { PlotTable } from './plot-file'
import { PlotFrame } from './plot-frame'
import { PlotMark } from './plot-mark'
import { SeriesLegend, SeriesSymbol, Whisker, type SymbolForm } from './symbols'
import { linearScale } from './ticks'

export interface IntervalRow {
  label: string
  /** in order of the series; null where there is no number */
  values: readonly ({ value: number; low: number | null; high: number | null; reading: string } | null)[]
}

const ROW = 22
const PAD = 12
/** Below this width row labels stand above their row. */
const NARROW = 520
const LABEL = 210

/** Numbers with their intervals, a row each: how far estimates can be told apart. */
export function IntervalPlot({
  rows,
  series,
  domain,
  axis,
  note,
  ...frame
}: {
  title: string
  description: string
  fileName: string
  table: PlotTable
  rows: readonly IntervalRow[]
  series: readonly { form: SymbolForm; label: string }[]
  domain: [number, number]
  axis: string
  /** a value that is marked across the plot, with its words */
  note?: { at: number; label: string }
}) {
  const draw = (width: number) => {
    const narrow = width < NARROW
    const legend = series.length > 1 ? 18 * (narrow ? series.length : 1) + 10 : 0
    const top = legend + (note ? 20 : 6)
    const rowHeight = ROW * series.length + PAD + (narrow ? 16 : 0)
    const box: Box = { left: narrow ? 8 : LABEL, right: width - 14, top, bottom: top + rows.length * rowHeight }
    const x = linearScale(domain, [box.left, box.right])
    const inside = (value: number) => Math.min(box.right, Math.max(box.left, x(value)))
    return {
      height: box.bottom + 46,
      content: (
        <>
          {legend > 0 ? (
            <SeriesLegend
              y={8}
              entries={series.map((one, at) => ({ ...one, at: narrow ? 0 : at * 300, row: narrow ? at : 0 }))}
            />
          ) : null}
          {note ? (
            <g>
              <path d={`M${x(note.at)} ${box.top - 4}V${box.bottom}`} stroke="var(--edge)" strokeDasharray="2 3" />
              <text x={x(note.at)} y={box.top - 8} textAnchor="middle" fill="var(--mute)">
                {note.label}
              </text>
            </g>
          ) : null}
          <XAxis box={box} scale={x} domain={domain} label={axis} grid />
          {rows.map((row, index) => {
            const from = box.top + index * rowHeight
            return (
              <g key={row.label}>
                <path d={`M${narrow ? box.left : 0} ${from}H${box.right}`} stroke="var(--line)" />
                <text
                  x={narrow ? box.left : 0}
                  y={narrow ? from + 15 : from + rowHeight / 2}
                  dy={narrow ? 0 : '0.35em'}
                  fill="var(--text)"
                >
                  {row.label}
                </text>
                {row.values.map((value, at) => {
                  if (!value) return null
                  const { form } = series[at]
                  const y = from + (narrow ? 16 : 0) + PAD / 2 + ROW * (at + 0.5)
                  return (
                    <PlotMark key={form} at={index * series.length + at} reading={value.reading}>
                      <rect x={box.left} y={y - ROW / 2} width={box.right - box.left} height={ROW} fill="transparent" />
                      {value.low !== null && value.high !== null ? (
                        <Whisker form={form} from={inside(value.low)} to={inside(value.high)} at={y} along="x" />
                      ) : null}
                      <SeriesSymbol form={form} x={inside(value.value)} y={y} />
                    </PlotMark>
                  )
                })}
              </g>
            )
          })}
        </>
      ),
    }
  }
  return <PlotFrame {...frame} draw={draw} />
}
