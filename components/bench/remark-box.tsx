import { useEffect, useRef } from 'react'
import { KeyCap } from '@/components/ui/key-cap'
import { RETURNED_FOCUS } from './bench-keys'
import { letGo } from './let-go'

export const REMARK_ID = 'bench-remark'
const MOST_CHARACTERS = 2000

/** One line until it is opened. What is written goes with the grade; closing keeps it. */
export function RemarkBox({
  remark,
  open,
  onOpen,
  onClose,
  onWrite,
}: {
  remark: string
  open: boolean
  onOpen: () => void
  onClose: () => void
  onWrite: (remark: string) => void
}) {
  const button = useRef<HTMLButtonElement>(null)
  const returning = useRef(false)
  useEffect(() => {
    if (open || !returning.current) return
    returning.current = false
    button.current?.setAttribute(RETURNED_FOCUS, '')
    button.current?.focus()
  }, [open])
  if (!open) {
    return (
      <button
        ref={button}
        type="button"
        onBlur={(event) => event.currentTarget.removeAttribute(RETURNED_FOCUS)}
        onClick={letGo(onOpen)}
        className="flex min-h-11 min-w-24 items-center gap-2 text-left text-note text-mute hover:text-text md:min-h-7"
      >
        <span className="hidden md:inline">
          <KeyCap>M</KeyCap>
        </span>
        {remark.trim() ? (
          <span className="line-clamp-1 text-text md:line-clamp-2">{remark}</span>
        ) : (
          <span className="font-semibold">Add a remark</span>
        )}
      </button>
    )
  }
  return (
    // On a phone over the top of the window, out of the keyboard's way, so that the picture keeps its size.
    <div className="flex w-full flex-col gap-1 max-md:fixed max-md:inset-x-0 max-md:top-0 max-md:z-30 max-md:border-b max-md:border-line max-md:bg-raise max-md:p-3">
      <label htmlFor={REMARK_ID} className="text-note font-semibold text-mute">
        Remark
      </label>
      <textarea
        id={REMARK_ID}
        autoFocus
        rows={3}
        maxLength={MOST_CHARACTERS}
        enterKeyHint="done"
        value={remark}
        aria-describedby="bench-remark-hint"
        onChange={(event) => onWrite(event.target.value)}
        onKeyDown={(event) => {
          if (event.nativeEvent.isComposing) return
          if (event.key === 'Escape' || (event.key === 'Enter' && !event.shiftKey)) {
            event.preventDefault()
            event.stopPropagation()
            returning.current = true
            onClose()
          }
        }}
        className="w-full resize-none rounded-control border border-edge bg-well px-2.5 py-1.5 text-base text-text md:text-small"
      />
      <div className="flex items-center justify-between gap-3">
        <p id="bench-remark-hint" className="text-note text-mute">
          Goes with the grade.<span className="max-md:hidden"> Enter or Esc closes, Shift+Enter starts a line.</span>
        </p>
        <button
          type="button"
          onClick={onClose}
          className="min-h-11 min-w-16 text-small font-semibold underline underline-offset-4 md:hidden"
        >
          Done
        </button>
      </div>
    </div>
  )
}
