import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import type { GradeBody, SendOutcome } from './bench-api'
import { GradeOutbox, type RefusedGrade, type WaitingGrade } from './grade-outbox'

beforeEach(() => {
  vi.useFakeTimers()
})
afterEach(() => vi.useRealTimers())

function memoryStorage() {
  const entries = new Map<string, string>()
  return {
    entries,
    get length() {
      return entries.size
    },
    key: (index: number) => [...entries.keys()][index] ?? null,
    getItem: (key: string) => entries.get(key) ?? null,
    setItem: (key: string, value: string) => void entries.set(key, value),
    removeItem: (key: string) => void entries.delete(key),
  }
}

function waiting(candidateId: number, grade: GradeBody['grade'] = 'A'): WaitingGrade {
  const body = {
    id: `uid-${candidateId}-${grade}`,
    grade,
    tags: [],
    remark: null,
    view: null,
    seconds: 1,
    reason: null,
  }
  return { candidateId, name: `SWS-${candidateId}`, first: true, at: candidateId, body }
}

function open(answers: SendOutcome[], storage: ReturnType<typeof memoryStorage> | null = memoryStorage()) {
  const sent: string[] = []
  const refused: RefusedGrade[] = []
  const send = async (_candidate: number, body: GradeBody): Promise<SendOutcome> => {
    sent.push(body.id)
    return answers.shift() ?? { outcome: 'saved' }
  }
  const outbox = new GradeOutbox({ storage, scope: 'north:7', send, onRefused: (grade) => refused.push(grade) })
  return { outbox, sent, refused, storage }
}

const trouble: SendOutcome = { outcome: 'trouble', sentence: 'The server cannot be reached.' }
const settled = () => vi.advanceTimersByTimeAsync(0)

describe('the outbox', () => {
  it('sends in order, one at a time, and forgets what was acknowledged', async () => {
    const { outbox, sent, storage } = open([])
    outbox.add(waiting(1))
    outbox.add(waiting(2))
    expect(outbox.snapshot().waiting).toHaveLength(2)
    expect(storage?.entries.size).toBe(2)
    await settled()
    expect(sent).toEqual(['uid-1-A', 'uid-2-A'])
    expect(outbox.snapshot()).toEqual({ waiting: [], refused: [], trouble: null })
    expect(storage?.entries.size).toBe(0)
  })

  it('tries again with the same id and growing pauses until it is taken, keeping the order', async () => {
    const { outbox, sent } = open([trouble, trouble])
    outbox.add(waiting(1))
    outbox.add(waiting(2))
    await settled()
    expect(outbox.snapshot()).toMatchObject({ trouble: 'The server cannot be reached.', waiting: { length: 2 } })
    await vi.advanceTimersByTimeAsync(1000)
    expect(sent).toEqual(['uid-1-A', 'uid-1-A'])
    await vi.advanceTimersByTimeAsync(1000)
    expect(sent).toHaveLength(2)
    await vi.advanceTimersByTimeAsync(1000)
    expect(sent).toEqual(['uid-1-A', 'uid-1-A', 'uid-1-A', 'uid-2-A'])
    expect(outbox.snapshot()).toMatchObject({ trouble: null, waiting: [] })
  })

  it('tries at once when told that the connection is back', async () => {
    const { outbox, sent } = open([trouble])
    outbox.add(waiting(1))
    await settled()
    outbox.flush()
    await settled()
    expect(sent).toHaveLength(2)
    expect(outbox.snapshot().waiting).toEqual([])
  })

  it('puts aside what the server refuses, says why, does not send it again and goes on', async () => {
    const { outbox, sent, refused } = open([{ outcome: 'refused', sentence: 'It is full.' }])
    outbox.add(waiting(1))
    outbox.add(waiting(2))
    await vi.advanceTimersByTimeAsync(120_000)
    expect(sent).toEqual(['uid-1-A', 'uid-2-A'])
    expect(refused).toMatchObject([{ candidateId: 1, sentence: 'It is full.' }])
    expect(outbox.snapshot()).toMatchObject({ waiting: [], refused: [{ sentence: 'It is full.' }] })
    outbox.dismiss('uid-1-A')
    expect(outbox.snapshot().refused).toEqual([])
  })

  it('finds after a reload what was not acknowledged and what was refused, and sends the first in order', async () => {
    const before = open([{ outcome: 'refused', sentence: 'It is full.' }, trouble])
    for (const id of [1, 3, 2]) before.outbox.add(waiting(id))
    await settled()
    before.outbox.stop()
    const after = open([], before.storage)
    expect(after.outbox.snapshot().refused).toMatchObject([{ candidateId: 1 }])
    after.outbox.flush()
    await settled()
    expect(after.sent).toEqual(['uid-2-A', 'uid-3-A'])
  })

  it('leaves alone what another person or campaign has waiting in the same browser', async () => {
    const storage = memoryStorage()
    storage.setItem('ringside:waiting:south:7:uid-9-A', JSON.stringify(waiting(9)))
    const { outbox, sent } = open([], storage)
    outbox.flush()
    await settled()
    expect(sent).toEqual([])
    expect(storage.entries.size).toBe(1)
  })

  it('still sends when the storage is full or forbidden', async () => {
    const storage = memoryStorage()
    storage.setItem = () => {
      throw new DOMException('full', 'QuotaExceededError')
    }
    const { outbox, sent } = open([], storage)
    outbox.add(waiting(1))
    await settled()
    expect(sent).toEqual(['uid-1-A'])
  })
})
