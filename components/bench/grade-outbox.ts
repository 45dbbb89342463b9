/**
 * Grades on their way to the server, in order, one at a time. Each is kept in the browser's storage until the server has
 * acknowledged it, so that neither a failed request nor a reload loses it; its id makes a repeated delivery harmless. What the
 * server refuses is put aside with its sentence and never sent again.
 */
import type { GradeBody, SendOutcome } from './bench-api'
import type { Answer } from './bench-session'

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
}

export interface OutboxSnapshot {
  waiting: readonly WaitingGrade[]
  refused: readonly RefusedGrade[]
  /** Why the first in line has not been taken yet; null while all goes well. */
  trouble: string | null
}

/** How many of them are first grades, which the server will count when they arrive. */
export function firstsIn(waiting: readonly WaitingGrade[]): number {
  return waiting.filter(({ first }) => first).length
}

interface Surroundings {
  /** One entry a grade, so that two tabs do not overwrite each other. null: memory only. */
  storage: Pick<Storage, 'getItem' | 'setItem' | 'removeItem' | 'key' | 'length'> | null
  /** Tells campaign and person apart in the storage. */
  scope: string
  send: (candidateId: number, body: GradeBody) => Promise<SendOutcome>
  onRefused: (grade: RefusedGrade) => void
}

const FIRST_RETRY_MS = 1000
const LAST_RETRY_MS = 30_000
export const EMPTY_OUTBOX: OutboxSnapshot = { waiting: [], refused: [], trouble: null }

export class GradeOutbox {
  readonly #around: Surroundings
  readonly #listeners = new Set<() => void>()
  #snapshot: OutboxSnapshot = EMPTY_OUTBOX
  #sending = false
  #failures = 0
  #timer: ReturnType<typeof setTimeout> | undefined

  constructor(around: Surroundings) {
    this.#around = around
    this.#snapshot = {
      waiting: this.#stored<WaitingGrade>('waiting'),
      refused: this.#stored<RefusedGrade>('refused'),
      trouble: null,
    }
  }

  subscribe = (listener: () => void): (() => void) => {
    this.#listeners.add(listener)
    return () => this.#listeners.delete(listener)
  }

  snapshot = (): OutboxSnapshot => this.#snapshot

  add(grade: WaitingGrade): void {
    this.#keep('waiting', grade.body.id, grade)
    this.#change({ waiting: [...this.#snapshot.waiting, grade] })
    this.flush()
  }

  /** Tries at once, whatever the pause was: on coming back online, on returning to the tab. */
  flush = (): void => {
    clearTimeout(this.#timer)
    void this.#sendAll()
  }

  dismiss(id: string): void {
    this.#drop('refused', id)
    this.#change({ refused: this.#snapshot.refused.filter(({ body }) => body.id !== id) })
  }

  stop(): void {
    clearTimeout(this.#timer)
  }

  async #sendAll(): Promise<void> {
    if (this.#sending) return
    this.#sending = true
    try {
      for (let first = this.#snapshot.waiting[0]; first; first = this.#snapshot.waiting[0]) {
        const answer = await this.#around.send(first.candidateId, first.body)
        if (answer.outcome === 'trouble') {
          this.#failures++
          this.#change({ trouble: answer.sentence })
          this.#timer = setTimeout(this.flush, Math.min(LAST_RETRY_MS, FIRST_RETRY_MS * 2 ** (this.#failures - 1)))
          return
        }
        this.#failures = 0
        this.#settle(first, answer)
      }
    } finally {
      this.#sending = false
    }
  }

  #settle(grade: WaitingGrade, answer: SendOutcome & { outcome: 'saved' | 'refused' }): void {
    const { id } = grade.body
    const waiting = this.#snapshot.waiting.filter(({ body }) => body.id !== id)
    if (answer.outcome === 'refused') {
      const refused = { ...grade, sentence: answer.sentence }
      this.#keep('refused', id, refused)
      this.#drop('waiting', id)
      this.#change({ waiting, trouble: null, refused: [...this.#snapshot.refused, refused] })
      this.#around.onRefused(refused)
    } else {
      this.#drop('waiting', id)
      this.#change({ waiting, trouble: null })
    }
  }

  #change(part: Partial<OutboxSnapshot>): void {
    this.#snapshot = { ...this.#snapshot, ...part }
    for (const listener of this.#listeners) listener()
  }

  #key(kind: string, id: string): string {
    return `ringside:${kind}:${this.#around.scope}:${id}`
  }

  // A full or forbidden storage must not stop the grading: the grade is still sent from memory.
  #keep(kind: string, id: string, grade: WaitingGrade): void {
    try {
      this.#around.storage?.setItem(this.#key(kind, id), JSON.stringify(grade))
    } catch {
      return
    }
  }

  #drop(kind: string, id: string): void {
    try {
      this.#around.storage?.removeItem(this.#key(kind, id))
    } catch {
      return
    }
  }

  #stored<T extends WaitingGrade>(kind: string): T[] {
    const grades: T[] = []
    try {
      const { storage } = this.#around
      for (let index = 0; index < (storage?.length ?? 0); index++) {
        const key = storage?.key(index)
        const text = key?.startsWith(this.#key(kind, '')) ? storage?.getItem(key) : null
        if (text) grades.push(JSON.parse(text) as T)
      }
    } catch {
      return grades
    }
    return grades.sort((a, b) => a.at - b.at)
  }
}
