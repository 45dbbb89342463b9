'use client'

import { Button } from '@/components/ui/button'
import { KeyCap } from '@/components/ui/key-cap'

/** The one action of the sheet, its confirmation, and the way back. */
export function SheetFoot({
  rest,
  unseen,
  page,
  confirming,
  lastDropped,
  onAsk,
  onFinish,
  onCancel,
  onUndo,
}: {
  /** How many would be dropped. */
  rest: number
  /** How many nobody has seen: they stay for the next page. */
  unseen: number
  page: number
  confirming: boolean
  /** How many the page before dropped; null where there is none to go back to. */
  lastDropped: number | null
  onAsk: () => void
  onFinish: () => void
  onCancel: () => void
  onUndo: () => void
}) {
  return (
    <div className="flex min-h-12 flex-wrap items-center gap-x-4 gap-y-2">
      {confirming ? (
        <div role="group" aria-label="Confirm" className="flex flex-wrap items-center gap-2">
          <p role="status" className="text-small">
            {rest === 1 ? '1 stamp goes' : `${rest} stamps go`} no further, {page - rest - unseen} to the bench.
            {unseen > 0 ? ` ${unseen} not seen yet ${unseen === 1 ? 'stays' : 'stay'} for the next page.` : ''}
          </p>
          <Button tone="lamp" autoFocus onClick={onFinish}>
            Drop {rest} <KeyCap>N</KeyCap>
          </Button>
          <Button onClick={onCancel}>
            Keep looking <KeyCap>Esc</KeyCap>
          </Button>
        </div>
      ) : page > 0 ? (
        <>
          <Button tone="lamp" onClick={rest > 0 ? onAsk : onFinish} disabled={unseen === page}>
            {rest === 0 ? 'Next page' : rest === page ? `Drop all ${rest}` : `Drop the other ${rest}`}{' '}
            <KeyCap>N</KeyCap>
          </Button>
          {unseen > 0 ? (
            <p className="text-small text-mute">
              {unseen === page ? 'None' : unseen} of this page {unseen === page || unseen > 1 ? 'have' : 'has'}
              {unseen === page ? ' been seen yet.' : ' not been seen yet: scroll, or wait for the pictures.'}
            </p>
          ) : null}
        </>
      ) : null}
      {lastDropped === null || confirming ? null : (
        <p role="status" className="flex items-center gap-2 text-small text-mute">
          {lastDropped === 1 ? '1 was' : `${lastDropped} were`} dropped on the page before.
          <Button tone="bare" onClick={onUndo}>
            Undo <KeyCap>Z</KeyCap>
          </Button>
        </p>
      )}
    </div>
  )
}
