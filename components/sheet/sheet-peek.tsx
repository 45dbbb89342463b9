'use client'

import { BenchDialog } from '@/components/bench/bench-dialog'
import { Button } from '@/components/ui/button'
import { KeyCap } from '@/components/ui/key-cap'
import type { SheetStamp } from '@/lib/work/sheet/lend-sheet'

/** One stamp large, with its other views. The keys of the sheet go on working under it. */
export function SheetPeek({
  stamp,
  sent,
  view,
  onView,
  onToggle,
  onMove,
  onClose,
  onPicture,
}: {
  stamp: SheetStamp
  sent: boolean
  view: number
  onView: (index: number) => void
  onToggle: () => void
  onMove: (by: 'left' | 'right') => void
  onClose: () => void
  onPicture: () => void
}) {
  const shown = stamp.views[Math.min(view, stamp.views.length - 1)]
  return (
    <BenchDialog title={stamp.name} onClose={onClose}>
      <div className="mt-3 aspect-square w-full bg-black">
        {shown?.url ? (
          <img
            src={shown.url}
            onLoad={onPicture}
            alt={`${stamp.name}, ${shown.label}`}
            width={shown.width}
            height={shown.height}
            className="pixelated size-full object-contain"
          />
        ) : (
          <p className="grid size-full place-items-center text-small text-tray-text">This view has no picture.</p>
        )}
      </div>
      <div role="group" aria-label="Views" className="mt-2 flex flex-wrap gap-1.5">
        {stamp.views.map(({ key, label }, index) => (
          <Button
            key={key}
            aria-pressed={shown?.key === key}
            className={shown?.key === key ? 'border-lamp' : ''}
            onClick={() => onView(index)}
          >
            {index < 9 ? <KeyCap>{String(index + 1)}</KeyCap> : null}
            {label}
          </Button>
        ))}
      </div>
      <div className="mt-4 flex flex-wrap gap-2">
        <Button tone="lamp" onClick={onToggle}>
          {sent ? 'Take back' : 'Send on'} <KeyCap>S</KeyCap>
        </Button>
        <Button onClick={() => onMove('left')}>Before</Button>
        <Button onClick={() => onMove('right')}>Next</Button>
        <Button tone="bare" onClick={onClose}>
          Close
        </Button>
      </div>
    </BenchDialog>
  )
}
