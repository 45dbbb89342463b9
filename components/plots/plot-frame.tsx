'use client'

import { Download, Table2, ChartSpline } from 'lucide-react'
import { useId, useMemo, useRef, useState, type KeyboardEvent, type ReactNode } from 'react'
import { ToolButton } from '@/components/table/tool-button'
import { csvFile, saveFile, svgFile, type PlotTable } from './plot-file'
import { MarkFocusContext, type MarkFocus } from './plot-mark'
import { PlotTableView } from './plot-table'
import { useWidth } from './use-width'

export interface Drawing {
  height: number
  /** wider than the place there is: it then scrolls sideways */
  width?: number
  content: ReactNode
}

const STEP: Record<string, number> = { ArrowRight: 1, ArrowDown: 1, ArrowLeft: -1, ArrowUp: -1 }

/**
 * A plot with its title, its table and its files. `draw` is told the width that there is, in pixels, so that letters keep their
 * size on a phone. Everything drawn names colours as `var(--…)` in attributes, so that the file can resolve them.
 */
export function PlotFrame({
  title,
  description,
  fileName,
  table,
  draw,
  what = 'point',
  tools,
}: {
  title: string
  /** what the plot says, for who cannot see it */
  description: string
  fileName: string
  table: PlotTable
  draw: (width: number) => Drawing
  /** what one comes to with the arrow keys */
  what?: string
  tools?: ReactNode
}) {
  const id = useId()
  const { ref, width } = useWidth<HTMLDivElement>(640)
  const svg = useRef<SVGSVGElement>(null)
  const [asTable, setAsTable] = useState(false)
  const [active, setActive] = useState(0)
  const [reading, setReading] = useState<string | null>(null)
  const focus = useMemo<MarkFocus>(() => {
    return {
      active,
      onMark: (at, text) => {
        if (text !== null) setActive(at)
        setReading(text)
      },
    }
  }, [active])
  const drawing = draw(width)
  const drawnWidth = drawing.width ?? width

  const onKeyDown = (event: KeyboardEvent<SVGSVGElement>) => {
    const marks = [...(svg.current?.querySelectorAll<SVGGElement>('[data-mark]') ?? [])]
    const at = marks.findIndex((mark) => mark === document.activeElement)
    if (at < 0 || event.ctrlKey || event.metaKey || event.altKey) return
    const to = event.key === 'Home' ? 0 : event.key === 'End' ? marks.length - 1 : at + (STEP[event.key] ?? NaN)
    if (Number.isNaN(to)) return
    event.preventDefault()
    marks[Math.min(marks.length - 1, Math.max(0, to))].focus()
  }
  const saveSvg = () => {
    if (!svg.current) return
    const style = getComputedStyle(svg.current)
    saveFile(
      `${fileName}.svg`,
      'image/svg+xml',
      svgFile(svg.current, title, (variable) => style.getPropertyValue(variable)),
    )
  }

  return (
    <figure className="flex min-w-0 flex-col gap-2">
      <figcaption className="flex flex-wrap items-center justify-between gap-x-4 gap-y-2">
        <h3 id={`${id}-caption`} className="text-body font-semibold text-balance">
          {title}
        </h3>
        <span className="flex flex-wrap gap-1.5">
          {tools}
          <ToolButton
            aria-pressed={asTable}
            aria-label={`Show as ${asTable ? 'plot' : 'table'}: ${title}`}
            onClick={() => setAsTable(!asTable)}
          >
            {asTable ? <ChartSpline size={14} aria-hidden="true" /> : <Table2 size={14} aria-hidden="true" />}
            {asTable ? 'Plot' : 'Table'}
          </ToolButton>
          <ToolButton
            title="In the colours of the theme that you see"
            aria-label={`Save the plot as SVG: ${title}`}
            onClick={saveSvg}
            disabled={asTable}
          >
            <Download size={14} aria-hidden="true" />
            SVG
          </ToolButton>
          <ToolButton
            aria-label={`Save the numbers as CSV: ${title}`}
            onClick={() => saveFile(`${fileName}.csv`, 'text/csv;charset=utf-8', csvFile(table))}
          >
            <Download size={14} aria-hidden="true" />
            CSV
          </ToolButton>
        </span>
      </figcaption>
      <div ref={ref} className="min-w-0">
        {asTable ? (
          <PlotTableView caption={title} table={table} />
        ) : (
          <MarkFocusContext value={focus}>
            <div
              className="overflow-x-auto"
              {...(drawnWidth > width
                ? { tabIndex: 0, role: 'region', 'aria-label': `${title}, scrolls sideways` }
                : {})}
            >
              <svg
                ref={svg}
                viewBox={`0 0 ${drawnWidth} ${drawing.height}`}
                width={drawnWidth}
                height={drawing.height}
                role="group"
                aria-labelledby={`${id}-title ${id}-desc`}
                fontSize="12"
                className="block font-sans"
                onKeyDown={onKeyDown}
              >
                <title id={`${id}-title`}>{title}</title>
                <desc id={`${id}-desc`}>{description}</desc>
                {drawing.content}
              </svg>
            </div>
            <p aria-hidden="true" className="min-h-[2.4rem] text-note text-mute sm:min-h-[1.2rem]">
              {reading ? (
                <span className="text-text">{reading}</span>
              ) : (
                <>
                  <span className="pointer-coarse:hidden">{`Arrow keys move from ${what} to ${what}.`}</span>
                  <span className="hidden pointer-coarse:inline">{`Tap a ${what} to read it.`}</span>
                </>
              )}
            </p>
          </MarkFocusContext>
        )}
      </div>
    </figure>
  )
}
