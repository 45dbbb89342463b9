/**
 * Grades on their way to the server, in order, one at a time. Each is kept in the browser's database until the server has
 * acknowledged it, so that neither a failed request nor a reload loses it; its id makes a repeated delivery harmless. Tabs of one
 * person share what waits, and one of them sends at a time. What the server refuses for good is put aside with its sentence, and sent
 * again only when the person asks for it.
 */
import type { GradeBody, SendOutcome } from './bench-api'
import type { Answer } from './bench-session'
import type { BenchStore } from './bench-store'
import { dropOlder, olderGrades, type OlderStorage } from './older-outbox'

export interface WaitingGrade {
  candidateId: number
  name: string
  /** A first grade, not a correction. */
  first: boolean
  /** Of a correction: the answer that the server has, and that stands where it refuses this one. */
  before?: Answer
  /** Order of giving, milliseconds since 1970. */
  at: number
  body: GradeBody
}

export interface RefusedGrade extends WaitingGrade {
  sentence: string
  /** The server took it after all, and there is something to know of it. */
  taken?: true
}

export interface Trouble {
  sentence: string
  /** Signing in mends it. */
  signIn: boolean
}

export interface OutboxSnapshot {
  waiting: readonly WaitingGrade[]
  refused: readonly RefusedGrade[]
  /** Why the first in line has not been taken yet; null while all goes well. */
  trouble: Trouble | null
  /** Whether the browser keeps what waits; else it is in the memory of this tab alone. */
  kept: boolean
}

/** How many of them are first grades, which the server will count when they arrive. */
export function firstsIn(waiting: readonly WaitingGrade[]): number {
  return waiting.filter(({ first }) => first).length
}

/** What tabs tell each other. */
export type TabMessage =
  | { tell: 'gave'; grade: WaitingGrade }
  /** What was given can be read now. */
  | { tell: 'kept' }
  | { tell: 'settled'; id: string; candidateId?: number; called?: string }
  | { tell: 'dismissed'; id: string }
  /** What was refused is sent again. */
  | { tell: 'again'; grade: WaitingGrade }

export interface Surroundings {
  store: Pick<BenchStore, 'grades' | 'keepWaiting' | 'keepRefused' | 'forget'>
  /** Where grades were kept before there was a database. */
  older: OlderStorage | null
  /** Tells campaign and person apart. */
  scope: string
  send: (candidateId: number, body: GradeBody) => Promise<SendOutcome>
  /** Runs one piece of work at a time among all tabs of this scope. */
  exclusively: (work: () => Promise<void>) => Promise<void>
  tell: (message: TabMessage) => void
  onRefused: (grade: RefusedGrade) => void
  /** What the candidate of a grade that was taken is called, now that the person may know. */
  onCalled: (candidateId: number, called: string) => void
  /** Grades that this tab has not given: of an earlier visit, or of another tab. */
  onFound: (grades: readonly WaitingGrade[], where: 'earlier' | 'other tab') => void
}

const FIRST_RETRY_MS = 1000
const LAST_RETRY_MS = 30_000
export const EMPTY_OUTBOX: OutboxSnapshot = { waiting: [], refused: [], trouble: null, kept: true }
/** So many answers in a row that say no for now, and the rest waits too. */
const MOST_HELD = 3
const REPLACED = 'It replaced the grade that you had given this candidate in another window or on another device.'
const LATE =
  'It came when this candidate had all its looks, so it is kept beside them for you and the leads, and counts in no verdict.'

export class GradeOutbox {
  readonly #around: Surroundings
  readonly #listeners = new Set<() => void>()
  /** Given in this tab and not settled: whatever becomes of the database, they are sent from here. */
  readonly #mine = new Map<string, WaitingGrade>()
  /** Settled here or in another tab: a reading that began before does not bring them back. */
  readonly #settled = new Set<string>()
  readonly #dismissed = new Set<string>()
  readonly #known = new Set<string>()
  #snapshot: OutboxSnapshot = EMPTY_OUTBOX
  #queued = false
  #stopped = false
  #failures = 0
  #newest = 0
  #timer: ReturnType<typeof setTimeout> | undefined

  constructor(around: Surroundings) {
    this.#around = around
  }

  subscribe = (listener: () => void): (() => void) => {
    this.#listeners.add(listener)
    return () => this.#listeners.delete(listener)
  }

  snapshot = (): OutboxSnapshot => this.#snapshot

  /** Reads what an earlier visit or another tab left, also from where grades were kept before, and sends it. */
  async open(): Promise<void> {
    await this.#moveOlder()
    await this.#read('earlier')
    this.flush()
  }

  add(given: WaitingGrade): void {
    // A clock that was set back must not send a correction before what it corrects.
    const grade = { ...given, at: Math.max(given.at, this.#newest + 1) }
    this.#newest = grade.at
    this.#known.add(grade.body.id)
    this.#mine.set(grade.body.id, grade)
    this.#change({ waiting: this.#inOrder(this.#snapshot.waiting) })
    void this.#keep([grade])
    this.#around.tell({ tell: 'gave', grade })
    this.flush()
  }

  /** Tries at once, whatever the pause was: on coming back online, on returning to the tab. */
  flush = (): void => {
    clearTimeout(this.#timer)
    if (this.#queued) return
    this.#queued = true
    void this.#around.exclusively(() => {
      this.#queued = false
      return this.#sendAll()
    })
  }

  /** What another tab says. */
  async hear(message: TabMessage): Promise<void> {
    if (message.tell === 'settled') {
      this.#settled.add(message.id)
      this.#mine.delete(message.id)
      this.#call(message)
    }
    if (message.tell === 'dismissed') this.#dismiss(message.id)
    if (message.tell === 'gave') this.#meet([message.grade], 'other tab')
    if (message.tell === 'again') {
      this.#settled.delete(message.grade.body.id)
      this.#change({ refused: this.#snapshot.refused.filter(({ body }) => body.id !== message.grade.body.id) })
    }
    await this.#read('other tab')
  }

  dismiss(id: string): void {
    this.#dismiss(id)
    void this.#drop('refused', id)
    this.#around.tell({ tell: 'dismissed', id })
  }

  /** What was refused goes into the line again, with the same id. */
  sendAgain(id: string): void {
    const found = this.#snapshot.refused.find(({ body }) => body.id === id)
    if (!found) return
    const { sentence: _, taken: __, ...grade } = found
    this.#settled.delete(id)
    this.#mine.set(id, grade)
    this.#change({
      refused: this.#snapshot.refused.filter((one) => one !== found),
      waiting: this.#inOrder(this.#snapshot.waiting),
    })
    void this.#keep([grade])
      .then(() => this.#drop('refused', id))
      .then(() => {
        this.#around.tell({ tell: 'again', grade })
        this.flush()
      })
  }

  /** No more tries after the one that is under way. */
  stop(): void {
    this.#stopped = true
    clearTimeout(this.#timer)
  }

  #dismiss(id: string): void {
    this.#dismissed.add(id)
    this.#change({ refused: this.#snapshot.refused.filter(({ body }) => body.id !== id) })
  }

  async #sendAll(): Promise<void> {
    if (!this.#snapshot.kept && this.#mine.size > 0) await this.#keep([...this.#mine.values()])
    /** Of these candidates nothing more is sent this time, so that a correction never comes before what it corrects. */
    const held = new Set<number>()
    let trouble: Trouble | null = null
    for (;;) {
      await this.#read('other tab')
      const first = this.#snapshot.waiting.find(({ candidateId }) => !held.has(candidateId))
      if (!first) break
      const answer = await this.#around.send(first.candidateId, first.body)
      if (answer.outcome !== 'trouble') {
        if (held.size === 0) this.#failures = 0
        await this.#settle(first, answer)
        continue
      }
      trouble ??= { sentence: answer.sentence, signIn: answer.signIn ?? false }
      held.add(first.candidateId)
      if (!answer.answered || held.size >= MOST_HELD) break
    }
    this.#change({ trouble })
    if (!trouble) return
    this.#failures++
    const pause = Math.min(LAST_RETRY_MS, FIRST_RETRY_MS * 2 ** (this.#failures - 1))
    if (!this.#stopped) this.#timer = setTimeout(this.flush, pause)
  }

  #call({ candidateId, called }: { candidateId?: number; called?: string }): void {
    if (candidateId !== undefined && called !== undefined) this.#around.onCalled(candidateId, called)
  }

  async #settle(sent: WaitingGrade, answer: SendOutcome & { outcome: 'saved' | 'refused' }): Promise<void> {
    const called = answer.outcome === 'saved' ? answer.called : undefined
    const grade = { ...sent, name: called ?? sent.name }
    const { candidateId } = sent
    const { id } = sent.body
    this.#settled.add(id)
    this.#mine.delete(id)
    const told: RefusedGrade | null =
      answer.outcome === 'refused'
        ? { ...grade, sentence: answer.sentence }
        : answer.late
          ? { ...grade, sentence: LATE, taken: true }
          : answer.replaced && grade.first
            ? { ...grade, sentence: REPLACED, taken: true }
            : null
    if (told) this.#known.add(id)
    this.#change({
      waiting: this.#inOrder(this.#snapshot.waiting),
      refused: told ? [...this.#snapshot.refused, told] : this.#snapshot.refused,
      trouble: null,
    })
    if (told && !told.taken) this.#around.onRefused(told)
    if (told) await this.#around.store.keepRefused([told]).catch(() => this.#change({ kept: false }))
    else await this.#drop('waiting', id)
    this.#call({ candidateId, called })
    this.#around.tell({ tell: 'settled', id, candidateId, called })
  }

  /** What the database holds, with what this tab holds beside it. */
  async #read(where: 'earlier' | 'other tab'): Promise<void> {
    let stored: Awaited<ReturnType<BenchStore['grades']>>
    try {
      stored = await this.#around.store.grades()
    } catch {
      return this.#change({ kept: false })
    }
    const shown = new Set(this.#snapshot.refused.map(({ body }) => body.id))
    const refused = stored.refused.filter(
      ({ body: { id } }) => !shown.has(id) && !this.#dismissed.has(id) && !this.#mine.has(id),
    )
    const waiting = this.#inOrder(stored.waiting)
    if (refused.length > 0 || !same(waiting, this.#snapshot)) {
      this.#change({ waiting, refused: [...this.#snapshot.refused, ...refused].sort(byTime) })
    }
    this.#meet(waiting, where)
    if (where === 'other tab') for (const grade of refused) if (!grade.taken) this.#around.onRefused(grade)
  }

  #meet(grades: readonly WaitingGrade[], where: 'earlier' | 'other tab'): void {
    const strange = grades.filter(({ body }) => !this.#known.has(body.id))
    for (const { body, at } of strange) {
      this.#known.add(body.id)
      this.#newest = Math.max(this.#newest, at)
    }
    if (strange.length > 0) this.#around.onFound(strange, where)
  }

  #inOrder(stored: readonly WaitingGrade[]): WaitingGrade[] {
    const all = new Map(stored.map((grade) => [grade.body.id, grade]))
    for (const [id, grade] of this.#mine) all.set(id, grade)
    return [...all.values()].filter(({ body }) => !this.#settled.has(body.id)).sort(byTime)
  }

  #change(part: Partial<OutboxSnapshot>): void {
    this.#snapshot = { ...this.#snapshot, ...part }
    for (const listener of this.#listeners) listener()
  }

  // A full or forbidden database must not stop the grading: the grade is still sent from memory.
  async #keep(grades: readonly WaitingGrade[]): Promise<void> {
    try {
      await this.#around.store.keepWaiting(grades)
      this.#around.tell({ tell: 'kept' })
      if (!this.#snapshot.kept) this.#change({ kept: true })
    } catch {
      this.#change({ kept: false })
    }
  }

  /** What cannot be dropped is sent once more on the next visit, which its id makes harmless. */
  async #drop(kind: 'waiting' | 'refused', id: string): Promise<void> {
    await this.#around.store.forget(kind, id).catch(() => this.#change({ kept: false }))
  }

  async #moveOlder(): Promise<void> {
    const { older, scope, store } = this.#around
    const found = olderGrades(older, scope)
    if (found.waiting.length + found.refused.length === 0) return
    try {
      await store.keepWaiting(found.waiting)
      await store.keepRefused(found.refused)
      dropOlder(older, scope)
    } catch {
      for (const grade of found.waiting) this.#mine.set(grade.body.id, grade)
      this.#change({ kept: false, waiting: this.#inOrder([]), refused: found.refused })
      this.#meet(found.waiting, 'earlier')
    }
  }
}

const byTime = (a: WaitingGrade, b: WaitingGrade): number =>
  a.at - b.at || (a.body.id < b.body.id ? -1 : a.body.id > b.body.id ? 1 : 0)

const same = (waiting: readonly WaitingGrade[], now: OutboxSnapshot): boolean =>
  waiting.length === now.waiting.length && waiting.every(({ body }, index) => body.id === now.waiting[index].body.id)
