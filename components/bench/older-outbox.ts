/** Grades that a page of an earlier release left unsent in localStorage, one entry a grade. */
import type { RefusedGrade, WaitingGrade } from './grade-outbox'

export type OlderStorage = Pick<Storage, 'getItem' | 'removeItem' | 'key' | 'length'>

const KINDS = ['waiting', 'refused'] as const

const prefix = (kind: (typeof KINDS)[number], scope: string) => `ringside:${kind}:${scope}:`

function keysOf(storage: OlderStorage, beginning: string): string[] {
  return Array.from({ length: storage.length }, (_, index) => storage.key(index) ?? '').filter((key) =>
    key.startsWith(beginning),
  )
}

function entries<T extends WaitingGrade>(storage: OlderStorage, beginning: string): T[] {
  return keysOf(storage, beginning).flatMap((key) => {
    try {
      return [JSON.parse(storage.getItem(key) ?? '') as T]
    } catch {
      return []
    }
  })
}

export function olderGrades(
  storage: OlderStorage | null,
  scope: string,
): { waiting: WaitingGrade[]; refused: RefusedGrade[] } {
  try {
    if (!storage) return { waiting: [], refused: [] }
    return { waiting: entries(storage, prefix('waiting', scope)), refused: entries(storage, prefix('refused', scope)) }
  } catch {
    return { waiting: [], refused: [] }
  }
}

export function dropOlder(storage: OlderStorage | null, scope: string): void {
  try {
    if (storage)
      for (const kind of KINDS) for (const key of keysOf(storage, prefix(kind, scope))) storage.removeItem(key)
  } catch {
    // They are sent once more on the next visit, which their ids make harmless.
    return
  }
}
