'use client'

import { Dialog } from 'radix-ui'
import type { ReactNode } from 'react'

/** A sheet over the bench. It keeps the focus inside and closes with Esc. */
export function BenchDialog({
  title,
  onClose,
  onEscape,
  children,
}: {
  title: string
  onClose: () => void
  /** Hears Esc first; what prevents its default keeps the sheet open. */
  onEscape?: (event: KeyboardEvent) => void
  children: ReactNode
}) {
  return (
    <Dialog.Root open onOpenChange={(open) => (open ? undefined : onClose())}>
      <Dialog.Portal>
        <Dialog.Overlay className="night fixed inset-0 z-40 bg-black/70" />
        <Dialog.Content
          aria-describedby={undefined}
          onEscapeKeyDown={onEscape}
          // The first control is no place to begin: Space would press it.
          onOpenAutoFocus={(event) => {
            event.preventDefault()
            if (event.currentTarget instanceof HTMLElement) event.currentTarget.focus()
          }}
          className="night fixed inset-x-3 top-1/2 z-50 mx-auto max-h-[92dvh] max-w-lg -translate-y-1/2 overflow-y-auto rounded-tray border border-line bg-raise p-5 text-text outline-none md:p-6"
        >
          <Dialog.Title className="text-title font-semibold">{title}</Dialog.Title>
          {children}
        </Dialog.Content>
      </Dialog.Portal>
    </Dialog.Root>
  )
}
