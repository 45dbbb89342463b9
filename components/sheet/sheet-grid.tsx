'use client'

import { ArrowUpRight, Maximize2 } from 'lucide-react'
import { memo, useEffect, useMemo, useRef, type Ref } from 'react'
import type { SheetStamp } from '@/lib/work/sheet/lend-sheet'
import type { Seen } from './use-seen'

/** The page: one stop of the Tab key, arrows inside. Stamps lie on black with the caption below, never on the picture. */
export function SheetGrid({
  stamps,
  sent,
  at,
  gridRef,
  seen,
  onToggle,
  onFocus,
  onEnlarge,
}: {
  stamps: readonly SheetStamp[]
  sent: ReadonlySet<number>
  at: number
  gridRef: Ref<HTMLUListElement>
  seen: Pick<Seen, 'onPicture' | 'watch'>
  onToggle: (place: number) => void
  onFocus: (place: number) => void
  onEnlarge: (place: number) => void
}) {
  const latest = useRef({ onToggle, onFocus, onEnlarge })
  useEffect(() => {
    latest.current = { onToggle, onFocus, onEnlarge }
  })
  const hands = useMemo<Hands>(
    () => ({
      toggle: (place) => latest.current.onToggle(place),
      focus: (place) => latest.current.onFocus(place),
      enlarge: (place) => latest.current.onEnlarge(place),
    }),
    [],
  )
  return (
    <ul
      ref={gridRef}
      aria-label="Stamps of this page"
      className="grid grid-cols-[repeat(auto-fill,minmax(5.25rem,1fr))] gap-1.5 md:grid-cols-[repeat(auto-fill,minmax(6.75rem,1fr))] md:gap-2"
    >
      {stamps.map((stamp, place) => (
        <GridStamp
          key={stamp.id}
          stamp={stamp}
          place={place}
          isSent={sent.has(stamp.id)}
          isAt={place === at}
          onPicture={seen.onPicture}
          watch={seen.watch}
          hands={hands}
        />
      ))}
    </ul>
  )
}

interface Hands {
  toggle: (place: number) => void
  focus: (place: number) => void
  enlarge: (place: number) => void
}

/** One of sixty: drawn again only when something of its own changes. */
const GridStamp = memo(function GridStamp({
  stamp,
  place,
  isSent,
  isAt,
  onPicture,
  watch,
  hands,
}: {
  stamp: SheetStamp
  place: number
  isSent: boolean
  isAt: boolean
  onPicture: Seen['onPicture']
  watch: Seen['watch']
  hands: Hands
}) {
  const item = useRef<HTMLLIElement>(null)
  useEffect(() => (item.current ? watch(stamp.id, item.current) : undefined), [watch, stamp.id])
  const view = stamp.views[0]
  return (
    <li
      ref={item}
      className={`flex flex-col rounded-tray border ${isSent ? 'border-lamp' : isAt ? 'border-edge' : 'border-line'}`}
    >
      <button
        type="button"
        tabIndex={isAt ? 0 : -1}
        aria-pressed={isSent}
        aria-label={`${stamp.name}, send on`}
        onClick={() => hands.toggle(place)}
        onFocus={() => hands.focus(place)}
        className={`relative block aspect-square w-full overflow-hidden rounded-t-tray bg-black focus-visible:z-10 ${isSent ? 'outline outline-2 -outline-offset-2 outline-lamp' : ''}`}
      >
        {view?.url ? (
          <img
            ref={(image) => {
              if (image?.complete && image.naturalWidth > 0) onPicture(stamp.id)
            }}
            onLoad={() => onPicture(stamp.id)}
            src={view.url}
            alt=""
            width={view.width}
            height={view.height}
            draggable={false}
            className="pixelated absolute inset-0 size-full object-contain"
          />
        ) : (
          <span className="absolute inset-0 grid place-items-center p-1 text-note text-tray-text">No picture</span>
        )}
      </button>
      <span className="flex min-h-6 items-center justify-between pl-1.5">
        {isSent ? (
          <span className="flex items-center gap-0.5 truncate text-[0.6875rem] font-semibold text-lamp">
            <ArrowUpRight size={13} aria-hidden="true" />
            Sent on
          </span>
        ) : (
          // Where it is cut off, the end of a name tells it from the next.
          <span className="figures truncate text-left text-[0.6875rem] text-tray-text [direction:rtl]">
            <bdi>{stamp.name}</bdi>
          </span>
        )}
        <button
          type="button"
          tabIndex={-1}
          aria-label={`Enlarge ${stamp.name}`}
          onClick={() => hands.enlarge(place)}
          className="grid size-6 shrink-0 place-items-center rounded-key text-mute hover:text-text"
        >
          <Maximize2 size={12} aria-hidden="true" />
        </button>
      </span>
    </li>
  )
})
