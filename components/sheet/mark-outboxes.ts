/** The outboxes of this page. They live on when the sheet is left by a link. */
import { BenchStore } from '@/components/bench/bench-store'
import { exclusively } from '@/components/bench/exclusively'
import { MarkOutbox } from './mark-outbox'
import type { SheetOwner } from './sheet-api'

const open = new Map<string, { outbox: MarkOutbox; close: () => void }>()

export function marksOf({ slug, personId }: SheetOwner): MarkOutbox {
  const scope = `${slug}:${personId}`
  const known = open.get(scope)
  if (known) return known.outbox
  const store = new BenchStore(scope)
  const outbox = new MarkOutbox({ slug, personId }, store, (work) => exclusively(`ringside-sheet:${scope}`, work))
  const again = () => void outbox.flush()
  const leaving = (event: BeforeUnloadEvent) => {
    const { waiting, kept } = outbox.state()
    if (waiting > 0 && !kept) event.preventDefault()
  }
  window.addEventListener('online', again)
  window.addEventListener('pageshow', again)
  window.addEventListener('beforeunload', leaving)
  open.set(scope, {
    outbox,
    close: () => {
      outbox.stop()
      void store.close()
      window.removeEventListener('online', again)
      window.removeEventListener('pageshow', again)
      window.removeEventListener('beforeunload', leaving)
    },
  })
  return outbox
}

/** As when the page is closed. */
export function closeMarkOutboxes(): void {
  for (const { close } of open.values()) close()
  open.clear()
}
