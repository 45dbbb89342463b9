/**
 * Marks on their way. Each is kept in the browser, under a name of its own so that tabs do not overwrite each other, before the sheet
 * moves on, and forgotten only once the server has said that it has it: a reload, a lost network or a signed-out hour loses none.
 */
import { makeUid } from '@/components/bench/make-uid'
import type { MarkInput } from '@/lib/work/sheet/mark-input'
import type { PassersProgress } from '@/lib/work/sheet/sheet-progress'
import { sendMarks, type SheetOwner } from './sheet-api'

export interface OutboxState {
  waiting: number
  /** What keeps marks from arriving just now, and what the server refused for good. */
  trouble: string | null
  refused: string | null
}

/** Marks sent in one request. */
const BATCH = 200
const FIRST_PAUSE_MS = 2000
const LONGEST_PAUSE_MS = 30_000

interface KeptMark extends MarkInput {
  /** Marks go in the order in which they were made. */
  order: number
}

export class MarkOutbox {
  readonly #prefix: string
  readonly #kept = new Map<string, KeptMark>()
  readonly #listeners = new Set<() => void>()
  #state: OutboxState = { waiting: 0, trouble: null, refused: null }
  #sending: Promise<void> | null = null
  #pause = FIRST_PAUSE_MS
  #timer: ReturnType<typeof setTimeout> | undefined
  #order = 0

  constructor(
    readonly owner: SheetOwner,
    readonly onProgress: (progress: PassersProgress) => void,
  ) {
    this.#prefix = `ringside:sheet:${owner.slug}:${owner.personId}:`
    for (const mark of this.#stored()) this.#kept.set(mark.id, mark)
    this.#order = Math.max(0, ...[...this.#kept.values()].map(({ order }) => order))
    this.#tell({})
  }

  subscribe = (listener: () => void): (() => void) => {
    this.#listeners.add(listener)
    return () => this.#listeners.delete(listener)
  }

  state = (): OutboxState => this.#state

  /** Of each candidate the newest mark that waits. */
  waiting(): Map<number, MarkInput['mark']> {
    return new Map(this.#inOrder().map(({ candidate, mark }) => [candidate, mark]))
  }

  add(marks: readonly Omit<MarkInput, 'id'>[]): void {
    for (const mark of marks) {
      const kept = { ...mark, id: makeUid(), order: ++this.#order }
      this.#kept.set(kept.id, kept)
      try {
        localStorage.setItem(this.#prefix + kept.id, JSON.stringify(kept))
      } catch {
        this.#tell({ trouble: 'This browser keeps nothing for this page: leave it open until all marks have arrived.' })
      }
    }
    this.#tell({})
    void this.flush()
  }

  /** Sends what waits; settles when it has arrived or there is trouble, after which it is tried again by itself. */
  flush = (): Promise<void> => {
    clearTimeout(this.#timer)
    this.#sending ??= this.#send().finally(() => {
      this.#sending = null
    })
    return this.#sending
  }

  stop(): void {
    clearTimeout(this.#timer)
  }

  async #send(): Promise<void> {
    for (let batch = this.#inOrder().slice(0, BATCH); batch.length > 0; batch = this.#inOrder().slice(0, BATCH)) {
      try {
        const answer = await sendMarks(
          this.owner,
          batch.map(({ id, candidate, mark }) => ({ id, candidate, mark })),
        )
        for (const id of [...answer.saved, ...answer.refused.map((one) => one.id)]) this.#forget(id)
        this.#pause = FIRST_PAUSE_MS
        const refused = answer.refused[0]?.sentence ?? this.#state.refused
        this.#tell({ trouble: null, refused })
        this.onProgress(answer.progress)
      } catch (error) {
        this.#tell({ trouble: error instanceof Error ? error.message : 'The server has trouble just now.' })
        this.#timer = setTimeout(() => void this.flush(), this.#pause)
        this.#pause = Math.min(LONGEST_PAUSE_MS, this.#pause * 2)
        return
      }
    }
  }

  #inOrder(): KeptMark[] {
    return [...this.#kept.values()].toSorted((a, b) => a.order - b.order)
  }

  #forget(id: string): void {
    this.#kept.delete(id)
    try {
      localStorage.removeItem(this.#prefix + id)
    } catch {
      // Sent again at the next visit, which changes nothing.
    }
  }

  *#stored(): Iterable<KeptMark> {
    try {
      const names = Array.from({ length: localStorage.length }, (_, n) => localStorage.key(n) ?? '')
      for (const name of names) {
        if (name.startsWith(this.#prefix)) yield JSON.parse(localStorage.getItem(name) ?? '') as KeptMark
      }
    } catch {
      // Nothing is kept, or it cannot be read.
    }
  }

  #tell(change: Partial<OutboxState>): void {
    this.#state = { ...this.#state, ...change, waiting: this.#kept.size }
    for (const listener of this.#listeners) listener()
  }
}
