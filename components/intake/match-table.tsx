'use client'

import { useVirtualizer } from '@tanstack/react-virtual'
import { CircleAlert } from 'lucide-react'
import { useRef } from 'react'
import type { PreviewRow } from '@/lib/work/intake/match-preview'

const ROW_PX = 44
const GRID =
  'grid grid-cols-[minmax(0,1fr)_5.5rem_2.5rem] gap-x-3 md:grid-cols-[minmax(0,1.3fr)_8rem_3rem_11rem_minmax(0,1.5fr)]'

const position = ({ raDeg, decDeg }: PreviewRow): string =>
  raDeg === null || decDeg === null ? '' : `${raDeg.toFixed(5)} ${decDeg >= 0 ? '+' : ''}${decDeg.toFixed(5)}`

/** File to candidate, band and position, with what is wrong; only the rows in sight are drawn. */
export function MatchTable({ rows }: { rows: PreviewRow[] }) {
  const scroller = useRef<HTMLDivElement>(null)
  // eslint-disable-next-line react-hooks/incompatible-library -- it tells React itself when it changes
  const virtual = useVirtualizer({
    count: rows.length,
    getScrollElement: () => scroller.current,
    estimateSize: () => ROW_PX,
    overscan: 8,
  })
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
        className="h-80 overflow-y-auto border-b border-line md:h-[28rem]"
      >
        <div className="relative w-full" style={{ height: virtual.getTotalSize() }}>
          {virtual.getVirtualItems().map(({ index, start }) => (
            <MatchRow key={index} row={rows[index]} index={index} top={start} />
          ))}
        </div>
      </div>
    </div>
  )
}

function MatchRow({ row, index, top }: { row: PreviewRow; index: number; top: number }) {
  const { name, candidate, band, problem, note } = row
  const said = problem ?? note ?? ''
  return (
    <div
      role="row"
      aria-rowindex={index + 2}
      className={`${GRID} absolute inset-x-0 content-center border-b border-line px-2`}
      style={{ height: ROW_PX, transform: `translateY(${top}px)` }}
    >
      <span role="cell" className="figures min-w-0 truncate" title={name}>
        <span className="hidden md:inline">{name}</span>
        <span className="md:hidden">{name.slice(name.lastIndexOf('/') + 1)}</span>
        {said ? (
          <span className={`block truncate text-note md:hidden ${problem ? 'text-alarm' : 'text-mute'}`}>{said}</span>
        ) : null}
      </span>
      <span role="cell" className="figures truncate" title={candidate ?? ''}>
        {candidate ?? <span className="text-mute">{row.kind === 'fits' ? 'by header' : ''}</span>}
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
        className={`hidden min-w-0 items-center gap-1.5 md:flex ${problem ? 'text-alarm' : 'text-mute'}`}
      >
        {problem ? <CircleAlert size={15} className="shrink-0" aria-hidden="true" /> : null}
        <span className="line-clamp-2">{said}</span>
      </span>
    </div>
  )
}
