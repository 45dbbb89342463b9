'use client'

import { Dialog } from 'radix-ui'
import { Button } from '@/components/ui/button'
import { KeyCap } from '@/components/ui/key-cap'
import { KEY_TABLE } from './bench-keys'

/** All keys, and the switch that turns them off. The dialog keeps the focus inside and closes with Esc. */
export function HelpOverlay({
  open,
  onOpenChange,
  keysOn,
  onKeysOn,
}: {
  open: boolean
  onOpenChange: (open: boolean) => void
  keysOn: boolean
  onKeysOn: (on: boolean) => void
}) {
  return (
    <Dialog.Root open={open} onOpenChange={onOpenChange}>
      <Dialog.Portal>
        <Dialog.Overlay className="night fixed inset-0 z-40 bg-black/70" />
        <Dialog.Content
          aria-describedby={undefined}
          // The first control is the switch, which Space would turn.
          onOpenAutoFocus={(event) => {
            event.preventDefault()
            if (event.currentTarget instanceof HTMLElement) event.currentTarget.focus()
          }}
          className="night fixed inset-x-3 top-1/2 z-50 mx-auto max-h-[92dvh] max-w-lg -translate-y-1/2 overflow-y-auto outline-none rounded-tray border border-line bg-raise p-5 text-text md:p-6"
        >
          <Dialog.Title className="text-title font-semibold">Keys at the bench</Dialog.Title>
          <dl className="mt-4 grid grid-cols-[auto_1fr] items-baseline gap-x-5 gap-y-2 text-small">
            {KEY_TABLE.map(({ keys, does }) => (
              <div key={does} className="contents">
                <dt className="flex gap-1">
                  {keys.map((key) => (key === '…' ? <span key={key}>…</span> : <KeyCap key={key}>{key}</KeyCap>))}
                </dt>
                <dd className="text-mute">{does}</dd>
              </div>
            ))}
          </dl>
          <p className="mt-4 text-note text-mute">
            Held on the stamp, a mouse or a finger blinks too; swept sideways, it changes the view.
          </p>
          <label className="mt-4 flex min-h-11 items-center gap-3 border-t border-line pt-4 text-small">
            <input
              type="checkbox"
              role="switch"
              checked={keysOn}
              onChange={(event) => onKeysOn(event.target.checked)}
              className="size-5 accent-lamp"
            />
            <span>
              Single-key shortcuts
              <span className="block text-note text-mute">
                Turn them off if you speak to your computer or keys get pressed by accident. Remembered in this browser.
              </span>
            </span>
          </label>
          <Dialog.Close asChild>
            <Button className="mt-4 min-h-11">Back to the bench</Button>
          </Dialog.Close>
        </Dialog.Content>
      </Dialog.Portal>
    </Dialog.Root>
  )
}
