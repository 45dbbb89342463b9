import type { RefusedGrade, WaitingGrade } from './grade-outbox'
import type { Surroundings } from './grade-outbox'

/** The database of a browser, for tests; `broken` makes it one that keeps nothing. */
export class MemoryStore implements Pick<Surroundings, 'store'> {
  readonly waiting = new Map<string, WaitingGrade>()
  readonly refused = new Map<string, RefusedGrade>()
  broken = false
  /** How long writing takes, milliseconds. */
  slowMs = 0

  readonly store: Surroundings['store'] = {
    grades: async () => {
      this.#check()
      return { waiting: [...this.waiting.values()], refused: [...this.refused.values()] }
    },
    keepWaiting: async (grades) => {
      this.#check()
      if (this.slowMs > 0) await new Promise((resolve) => setTimeout(resolve, this.slowMs))
      for (const grade of grades) this.waiting.set(grade.body.id, grade)
    },
    keepRefused: async (grades) => {
      this.#check()
      for (const grade of grades) {
        this.refused.set(grade.body.id, grade)
        this.waiting.delete(grade.body.id)
      }
    },
    forget: async (kind, id) => {
      this.#check()
      this[kind].delete(id)
    },
  }

  #check(): void {
    if (this.broken) throw new DOMException('full', 'QuotaExceededError')
  }
}

export function waitingGrade(
  candidateId: number,
  grade: WaitingGrade['body']['grade'] = 'A',
  more: Partial<WaitingGrade> = {},
): WaitingGrade {
  const body = {
    id: `uid-${candidateId}-${grade}`,
    grade,
    tags: [],
    remark: null,
    view: null,
    seconds: 1,
    reason: null,
  }
  return { candidateId, name: `SWS-${candidateId}`, first: true, at: candidateId, body, ...more }
}
