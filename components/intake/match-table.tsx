'use client'

import { useVirtualizer } from '@tanstack/react-virtual'
import { CircleAlert } from 'lucide-react'
import { useEffect, useRef } from 'react'
import type { PreviewRow } from '@/lib/work/intake/match-preview'
import { useNarrow } from './use-narrow'

const ROW_PX = 44
/** On a phone what is said of a file stands below it, on two lines. */
const TALL_ROW_PX = 84
const GRID =
  'grid grid-cols-[minmax(0,1fr)_5.5rem_2.5rem] gap-x-3 md:grid-cols-[minmax(0,1.3fr)_8rem_3rem_11rem_minmax(0,1.5fr)]'

const saidOf = ({ problem, note }: PreviewRow): string => problem ?? note ?? ''

const position = ({ raDeg, decDeg }: PreviewRow): string =>
  raDeg === null || decDeg === null ? '' : `${raDeg.toFixed(5)} ${decDeg >= 0 ? '+' : ''}${decDeg.toFixed(5)}`

/** File to candidate, band and position, with what is wrong; only the rows in sight are drawn. */
export function MatchTable({ rows }: { rows: PreviewRow[] }) {
  const scroller = useRef<HTMLDivElement>(null)
  const narrow = useNarrow()
  const heightOf = (index: number) => (narrow && saidOf(rows[index]) ? TALL_ROW_PX : ROW_PX)
  // eslint-disable-next-line react-hooks/incompatible-library -- it tells React itself when it changes
  const virtual = useVirtualizer({
    count: rows.length,
    getScrollElement: () => scroller.current,
    estimateSize: heightOf,
    overscan: 8,
  })
  useEffect(() => virtual.measure(), [virtual, rows, narrow])
  return (
    <div role="table" aria-label="How the files are matched" aria-rowcount={rows.length + 1} className="text-small">
      <div role="rowgroup">
        <div role="row" aria-rowindex={1} className={`${GRID} border-b border-line px-2 py-1.5 text-note text-mute`}>
          <span role="columnheader">File</span>
          <span role="columnheader">Candidate</span>
          <span role="columnheader">Band</span>
          <span role="columnheader" className="hidden md:block">
            Position
          </span>
          <span role="columnheader" className="hidden md:block">
            Problem
          </span>
        </div>
      </div>
      <div
        ref={scroller}
        role="rowgroup"
        tabIndex={0}
        aria-label="Matched files"
        className="max-h-80 overflow-y-auto border-b border-line md:max-h-[28rem]"
        style={{ height: Math.max(virtual.getTotalSize(), ROW_PX) }}
      >
        <div className="relative w-full" style={{ height: virtual.getTotalSize() }}>
          {virtual.getVirtualItems().map(({ index, start, size }) => (
            <MatchRow key={index} row={rows[index]} index={index} top={start} height={size} />
          ))}
        </div>
      </div>
    </div>
  )
}

function MatchRow({ row, index, top, height }: { row: PreviewRow; index: number; top: number; height: number }) {
  const { name, candidate, band, problem } = row
  const said = saidOf(row)
  return (
    <div
      role="row"
      aria-rowindex={index + 2}
      className={`${GRID} absolute inset-x-0 content-center border-b border-line px-2`}
      style={{ height, transform: `translateY(${top}px)` }}
    >
      <span role="cell" className="figures min-w-0 truncate" title={name}>
        <span className="hidden md:inline">{name}</span>
        <span className="md:hidden">{name.slice(name.lastIndexOf('/') + 1)}</span>
      </span>
      <span role="cell" className="figures truncate" title={candidate ?? ''}>
        {candidate ?? <span className="text-mute">{row.kind === 'fits' ? 'by header' : ''}</span>}
        {row.truth ? <span className="block text-note text-mute">stamp: {row.truth}</span> : null}
      </span>
      <span role="cell" className="figures">
        {band ?? ''}
      </span>
      <span role="cell" className="figures hidden truncate text-mute md:block">
        {position(row)}
      </span>
      <span
        role="cell"
        title={said}
        className={`col-span-3 min-w-0 items-center gap-1.5 text-note md:col-span-1 md:text-small ${said ? 'flex' : 'hidden md:flex'} ${problem ? 'text-alarm' : 'text-mute'}`}
      >
        {problem ? <CircleAlert size={15} className="shrink-0" aria-hidden="true" /> : null}
        <span className="line-clamp-2">{said}</span>
      </span>
    </div>
  )
}
