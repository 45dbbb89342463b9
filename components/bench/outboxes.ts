/**
 * The outboxes of this page, one for each campaign and person. They live on when the bench is left by a link, so that what waits
 * goes on from any page of the site, also where the browser keeps nothing.
 */
import { sendGrade } from './bench-api'
import { BenchStore } from './bench-store'
import { exclusively } from './exclusively'
import { GradeOutbox, type RefusedGrade, type TabMessage, type WaitingGrade } from './grade-outbox'

export interface OutboxListener {
  refused: (grade: RefusedGrade) => void
  called: (candidateId: number, called: string) => void
  /** Another tab has given these. */
  foundElsewhere: (grades: readonly WaitingGrade[]) => void
}

export interface OpenOutbox {
  outbox: GradeOutbox
  /** What an earlier visit left has been read. */
  opened: Promise<void>
  /** The bench that is in sight, if any. */
  listener: OutboxListener | null
  close: () => void
}

const open = new Map<string, OpenOutbox>()

function olderStorage(): Storage | null {
  try {
    return window.localStorage
  } catch {
    return null
  }
}

export function outboxOf(slug: string, personId: number): OpenOutbox {
  const scope = `${slug}:${personId}`
  const known = open.get(scope)
  if (known) return known
  const made = make(slug, personId, scope)
  open.set(scope, made)
  return made
}

/** As when the page is closed. */
export function closeOutboxes(): void {
  for (const { close } of open.values()) close()
  open.clear()
}

function make(slug: string, personId: number, scope: string): OpenOutbox {
  const tabs = 'BroadcastChannel' in globalThis ? new BroadcastChannel(`ringside-outbox:${scope}`) : null
  const store = new BenchStore(scope)
  let closed = false
  const outbox = new GradeOutbox({
    store,
    older: olderStorage(),
    scope,
    send: (candidateId, body) => sendGrade({ slug, personId }, candidateId, body),
    exclusively: (work) => exclusively(`ringside-outbox:${scope}`, work),
    tell: (message) => void (closed || tabs?.postMessage(message)),
    onRefused: (grade) => made.listener?.refused(grade),
    onCalled: (candidateId, called) => made.listener?.called(candidateId, called),
    onFound: (grades, where) => void (where === 'other tab' && made.listener?.foundElsewhere(grades)),
  })
  if (tabs) tabs.onmessage = ({ data }: MessageEvent<TabMessage>) => void outbox.hear(data)
  const visible = () => document.visibilityState === 'visible' && outbox.flush()
  const leaving = (event: BeforeUnloadEvent) => {
    const { waiting, kept } = outbox.snapshot()
    if (waiting.length > 0 && !kept) event.preventDefault()
  }
  window.addEventListener('online', outbox.flush)
  window.addEventListener('pageshow', outbox.flush)
  document.addEventListener('visibilitychange', visible)
  window.addEventListener('beforeunload', leaving)
  const made: OpenOutbox = {
    outbox,
    opened: outbox.open(),
    listener: null,
    close: () => {
      closed = true
      made.listener = null
      outbox.stop()
      tabs?.close()
      void store.close()
      window.removeEventListener('online', outbox.flush)
      window.removeEventListener('pageshow', outbox.flush)
      document.removeEventListener('visibilitychange', visible)
      window.removeEventListener('beforeunload', leaving)
    },
  }
  return made
}
