/** The database of this browser in which the bench keeps what must survive a reload, told apart by campaign and person. */
import { openDB, type DBSchema, type IDBPDatabase } from 'idb'
import type { Look } from './bench-session'
import { lookIdOf } from './look-id'
import type { MarkInput } from '@/lib/work/sheet/mark-input'
import type { RefusedGrade, WaitingGrade } from './grade-outbox'

interface Shape extends DBSchema {
  waiting: { key: [string, string]; value: Scoped<WaitingGrade> }
  refused: { key: [string, string]; value: Scoped<RefusedGrade> }
  looks: { key: [string, string]; value: { scope: string; id: string; look: Look } }
  /** Marks of the sheet on their way. */
  marks: { key: [string, string]; value: KeptMark & { scope: string } }
}

/** A mark of the sheet on its way, and when it was made, milliseconds since 1970: their order, among all tabs. */
export interface KeptMark extends MarkInput {
  at: number
}

type Scoped<T> = T & { scope: string; id: string }

const NAME = 'ringside-bench'

/** A candidate that came back turned is another look. */
export function lookKey({ candidate }: Pick<Look, 'candidate'>): string {
  const { candidateId, turned } = lookIdOf(candidate)
  return `${candidateId} ${turned ?? 0}`
}

/** Everything of one scope: its keys begin with it, and an array sorts after any number or string. */
const allOf = (scope: string) => IDBKeyRange.bound([scope], [scope, []])

/**
 * Every method rejects where the browser keeps nothing: in a private window of some browsers, with a full disk, or where the person
 * has forbidden it. A database that was closed under our feet is opened again by the next call.
 */
export class BenchStore {
  readonly #scope: string
  #opening: Promise<IDBPDatabase<Shape>> | null = null

  constructor(scope: string) {
    this.#scope = scope
  }

  async grades(): Promise<{ waiting: WaitingGrade[]; refused: RefusedGrade[] }> {
    const db = await this.#open()
    const transaction = db.transaction(['waiting', 'refused'])
    const [waiting, refused] = await Promise.all([
      transaction.objectStore('waiting').getAll(allOf(this.#scope)),
      transaction.objectStore('refused').getAll(allOf(this.#scope)),
    ])
    return { waiting, refused }
  }

  async keepWaiting(grades: readonly WaitingGrade[]): Promise<void> {
    const db = await this.#open()
    // Strict: resolved only when it is on the disk, so that a laptop which dies keeps it.
    const transaction = db.transaction('waiting', 'readwrite', { durability: 'strict' })
    for (const grade of grades) void transaction.store.put(this.#scoped(grade))
    await transaction.done
  }

  async keepRefused(grades: readonly RefusedGrade[]): Promise<void> {
    const db = await this.#open()
    const transaction = db.transaction(['waiting', 'refused'], 'readwrite', { durability: 'strict' })
    for (const grade of grades) {
      void transaction.objectStore('refused').put(this.#scoped(grade))
      void transaction.objectStore('waiting').delete([this.#scope, grade.body.id])
    }
    await transaction.done
  }

  async forget(kind: 'waiting' | 'refused', id: string): Promise<void> {
    const db = await this.#open()
    await db.delete(kind, [this.#scope, id])
  }

  /** The looks of the sitting, in the order in which they were given. */
  async looks(): Promise<Look[]> {
    const db = await this.#open()
    const kept = await db.getAll('looks', allOf(this.#scope))
    return kept.map(({ look }) => look).sort((a, b) => a.at - b.at)
  }

  async keepLook(look: Look): Promise<void> {
    const db = await this.#open()
    await db.put('looks', { scope: this.#scope, id: lookKey(look), look })
  }

  async forgetLook(look: Look): Promise<void> {
    const db = await this.#open()
    await db.delete('looks', [this.#scope, lookKey(look)])
  }

  async forgetLooks(): Promise<void> {
    const db = await this.#open()
    await db.delete('looks', allOf(this.#scope))
  }

  async marks(): Promise<KeptMark[]> {
    const db = await this.#open()
    return (await db.getAll('marks', allOf(this.#scope))).map(({ id, candidate, mark, at }) => ({
      id,
      candidate,
      mark,
      at,
    }))
  }

  async keepMarks(marks: readonly KeptMark[]): Promise<void> {
    const db = await this.#open()
    const transaction = db.transaction('marks', 'readwrite', { durability: 'strict' })
    for (const mark of marks) void transaction.store.put({ ...mark, scope: this.#scope })
    await transaction.done
  }

  async forgetMarks(ids: readonly string[]): Promise<void> {
    const db = await this.#open()
    const transaction = db.transaction('marks', 'readwrite')
    for (const id of ids) void transaction.store.delete([this.#scope, id])
    await transaction.done
  }

  async close(): Promise<void> {
    const opening = this.#opening
    this.#opening = null
    await opening?.then(
      (db) => db.close(),
      () => {},
    )
  }

  #scoped<T extends WaitingGrade>(grade: T): Scoped<T> {
    return { ...grade, scope: this.#scope, id: grade.body.id }
  }

  #open(): Promise<IDBPDatabase<Shape>> {
    if (this.#opening) return this.#opening
    const opening = connect(() => this.#forget(opening))
    this.#opening = opening
    opening.catch(() => this.#forget(opening))
    return opening
  }

  #forget(opening: Promise<IDBPDatabase<Shape>>): void {
    if (this.#opening === opening) this.#opening = null
  }
}

/** The scopes of which grades wait in this browser, whoever gave them. Rejects where the browser keeps nothing. */
export async function scopesWaiting(): Promise<string[]> {
  const db = await connect(() => {})
  try {
    return [...new Set((await db.getAllKeys('waiting')).map(([scope]) => scope))]
  } finally {
    db.close()
  }
}

async function connect(onClosed: () => void): Promise<IDBPDatabase<Shape>> {
  return openDB<Shape>(NAME, 2, {
    upgrade(db, before) {
      if (before < 1) {
        db.createObjectStore('waiting', { keyPath: ['scope', 'id'] })
        db.createObjectStore('refused', { keyPath: ['scope', 'id'] })
      } else {
        // How far undo reaches, told apart by the candidate alone.
        db.deleteObjectStore('looks')
      }
      db.createObjectStore('looks', { keyPath: ['scope', 'id'] })
      db.createObjectStore('marks', { keyPath: ['scope', 'id'] })
    },
    // A newer page wants to change the database.
    blocking(_now, _wanted, event) {
      onClosed()
      ;(event.target as IDBDatabase).close()
    },
    terminated: onClosed,
  })
}
