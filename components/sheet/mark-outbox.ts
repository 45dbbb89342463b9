/**
 * Marks on their way. Each is kept in the browser's database until the server has said that it has it: a reload, a lost network or
 * a signed-out hour loses none. Tabs share what waits, and it goes in the order in which it was made, whichever tab sends.
 */
import type { BenchStore, KeptMark } from '@/components/bench/bench-store'
import { makeUid } from '@/components/bench/make-uid'
import type { MarkInput } from '@/lib/work/sheet/mark-input'
import type { PassersProgress } from '@/lib/work/sheet/sheet-progress'
import { olderMarks } from './older-marks'
import { sendMarks, SheetTrouble, type SheetOwner } from './sheet-api'

export interface OutboxState {
  waiting: number
  /** What keeps marks from arriving just now; signing in may mend it. */
  trouble: { sentence: string; signIn: boolean } | null
  /** What the server refused for good. */
  refused: string | null
  /** Whether the browser keeps what waits; else it is in the memory of this tab alone. */
  kept: boolean
}

/** Marks sent in one request. */
const BATCH = 200
const FIRST_PAUSE_MS = 2000
const LONGEST_PAUSE_MS = 30_000
export const EMPTY_MARKS: OutboxState = { waiting: 0, trouble: null, refused: null, kept: true }

export class MarkOutbox {
  readonly #kept = new Map<string, KeptMark>()
  /** Arrived or refused: a reading that began before does not bring them back. */
  readonly #settled = new Set<string>()
  readonly #listeners = new Set<() => void>()
  #state: OutboxState = EMPTY_MARKS
  #sending: Promise<void> | null = null
  #pause = FIRST_PAUSE_MS
  #timer: ReturnType<typeof setTimeout> | undefined
  #stopped = false
  #newest = 0
  onProgress: (progress: PassersProgress) => void = () => {}

  constructor(
    readonly owner: SheetOwner,
    readonly store: Pick<BenchStore, 'marks' | 'keepMarks' | 'forgetMarks'>,
    /** Runs one piece of work at a time among all tabs of this person and campaign. */
    readonly exclusively: (work: () => Promise<void>) => Promise<void>,
  ) {}

  subscribe = (listener: () => void): (() => void) => {
    this.#listeners.add(listener)
    return () => this.#listeners.delete(listener)
  }

  state = (): OutboxState => this.#state

  /** Of each candidate the newest mark that waits. */
  waiting(): Map<number, MarkInput['mark']> {
    return new Map(this.#inOrder().map(({ candidate, mark }) => [candidate, mark]))
  }

  /** Reads what an earlier visit or another tab left, and sends it. */
  async open(): Promise<void> {
    const older = olderMarks(this.owner)
    for (const mark of older.marks) this.#kept.set(mark.id, mark)
    if (older.marks.length > 0 && (await this.#keep(older.marks))) older.drop()
    await this.#read()
    await this.flush()
  }

  add(marks: readonly Omit<MarkInput, 'id'>[]): void {
    // A clock that was set back must not send the later mark first.
    const made = marks.map((mark) => {
      this.#newest = Math.max(Date.now(), this.#newest + 1)
      return { ...mark, id: makeUid(), at: this.#newest }
    })
    for (const mark of made) this.#kept.set(mark.id, mark)
    this.#tell({})
    void this.#keep(made)
    void this.flush()
  }

  /** Sends what waits; settles when it has arrived or there is trouble, after which it is tried again by itself. */
  flush = (): Promise<void> => {
    clearTimeout(this.#timer)
    this.#sending ??= this.exclusively(() => this.#send()).finally(() => {
      this.#sending = null
    })
    return this.#sending
  }

  stop(): void {
    this.#stopped = true
    clearTimeout(this.#timer)
  }

  async #send(): Promise<void> {
    await this.#read()
    let size = BATCH
    for (let batch = this.#inOrder().slice(0, size); batch.length > 0; batch = this.#inOrder().slice(0, size)) {
      try {
        const marks = batch.map(({ id, candidate, mark }) => ({ id, candidate, mark }))
        const answer = await sendMarks(this.owner, marks)
        await this.#forget([...answer.saved, ...answer.refused.map((one) => one.id)])
        this.#pause = FIRST_PAUSE_MS
        this.#tell({ trouble: null, refused: answer.refused[0]?.sentence ?? this.#state.refused })
        this.onProgress(answer.progress)
      } catch (error) {
        const { sentence, signIn, final } =
          error instanceof SheetTrouble ? error : new SheetTrouble('The server has trouble just now.')
        if (final && batch.length > 1) {
          // One of them cannot be taken: the others can.
          size = 1
          continue
        }
        if (final) {
          await this.#forget([batch[0].id])
          this.#tell({ refused: sentence })
          continue
        }
        this.#tell({ trouble: { sentence, signIn } })
        if (!this.#stopped) this.#timer = setTimeout(() => void this.flush(), this.#pause)
        this.#pause = Math.min(LONGEST_PAUSE_MS, this.#pause * 2)
        return
      }
    }
  }

  async #read(): Promise<void> {
    try {
      for (const mark of await this.store.marks()) {
        if (!this.#settled.has(mark.id)) this.#kept.set(mark.id, mark)
        this.#newest = Math.max(this.#newest, mark.at)
      }
      if (this.#state.waiting !== this.#kept.size) this.#tell({})
    } catch {
      this.#tell({ kept: false })
    }
  }

  async #keep(marks: readonly KeptMark[]): Promise<boolean> {
    try {
      await this.store.keepMarks(marks)
      // It may have arrived while it was written.
      const gone = marks.map(({ id }) => id).filter((id) => this.#settled.has(id))
      if (gone.length > 0) await this.store.forgetMarks(gone)
      if (!this.#state.kept) this.#tell({ kept: true })
      return true
    } catch {
      this.#tell({ kept: false })
      return false
    }
  }

  #inOrder(): KeptMark[] {
    return [...this.#kept.values()].toSorted((a, b) => a.at - b.at)
  }

  /** What cannot be forgotten is sent once more at the next visit, which changes nothing. */
  async #forget(ids: readonly string[]): Promise<void> {
    for (const id of ids) {
      this.#settled.add(id)
      this.#kept.delete(id)
    }
    this.#tell({})
    await this.store.forgetMarks(ids).catch(() => {})
  }

  #tell(change: Partial<OutboxState>): void {
    this.#state = { ...this.#state, ...change, waiting: this.#kept.size }
    for (const listener of this.#listeners) listener()
  }
}
