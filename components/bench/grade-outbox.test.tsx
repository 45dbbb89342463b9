import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { MemoryStore, waitingGrade as waiting } from './_memory-store'
import type { GradeBody, SendOutcome } from './bench-api'
import { GradeOutbox, type RefusedGrade, type TabMessage, type WaitingGrade } from './grade-outbox'

beforeEach(() => {
  vi.useFakeTimers()
  localStorage.clear()
})
afterEach(() => vi.useRealTimers())

/** Tabs of one browser: one database, one turn at a time, and what one says the others hear. */
function browser() {
  const disk = new MemoryStore()
  const tabs: GradeOutbox[] = []
  let turn: Promise<void> = Promise.resolve()
  let working = 0
  let mostWorking = 0
  function open(answers: SendOutcome[] = [], scope = 'north:7') {
    const sent: string[] = []
    const refused: RefusedGrade[] = []
    const found: [string, number[]][] = []
    const names: [number, string][] = []
    const outbox: GradeOutbox = new GradeOutbox({
      store: disk.store,
      older: localStorage,
      scope,
      send: async (_candidate: number, body: GradeBody): Promise<SendOutcome> => {
        mostWorking = Math.max(mostWorking, ++working)
        sent.push(body.id)
        await Promise.resolve()
        working--
        return answers.shift() ?? { outcome: 'saved' }
      },
      exclusively: (work) => (turn = turn.then(work)),
      tell: (message: TabMessage) => {
        for (const tab of tabs) if (tab !== outbox) void tab.hear(structuredClone(message))
      },
      onRefused: (grade) => refused.push(grade),
      onCalled: (candidateId, called) => void names.push([candidateId, called]),
      onFound: (grades: readonly WaitingGrade[], where) =>
        found.push([where, grades.map(({ candidateId }) => candidateId)]),
    })
    tabs.push(outbox)
    return { outbox, sent, refused, found, names, close: () => (outbox.stop(), tabs.splice(tabs.indexOf(outbox), 1)) }
  }
  return { disk, open, mostWorking: () => mostWorking }
}

const trouble: SendOutcome = { outcome: 'trouble', sentence: 'The server cannot be reached.' }
const full: SendOutcome = { outcome: 'refused', sentence: 'It is full.' }
const settled = () => vi.advanceTimersByTimeAsync(0)

describe('the outbox', () => {
  it('sends in order, one at a time, and forgets what was acknowledged', async () => {
    const { disk, open } = browser()
    const { outbox, sent } = open()
    outbox.add(waiting(1))
    outbox.add(waiting(2))
    expect(outbox.snapshot().waiting).toHaveLength(2)
    expect(disk.waiting.size).toBe(2)
    await settled()
    expect(sent).toEqual(['uid-1-A', 'uid-2-A'])
    expect(outbox.snapshot()).toEqual({ waiting: [], refused: [], trouble: null, kept: true })
    expect(disk.waiting.size).toBe(0)
  })

  it('tries again with the same id and growing pauses until it is taken, keeping the order', async () => {
    const { outbox, sent } = browser().open([trouble, trouble])
    outbox.add(waiting(1))
    await settled()
    expect(outbox.snapshot()).toMatchObject({ trouble: { sentence: 'The server cannot be reached.', signIn: false } })
    await vi.advanceTimersByTimeAsync(1000)
    expect(sent).toEqual(['uid-1-A', 'uid-1-A'])
    await vi.advanceTimersByTimeAsync(1000)
    expect(sent).toHaveLength(2)
    await vi.advanceTimersByTimeAsync(1000)
    expect(sent).toHaveLength(3)
    expect(outbox.snapshot()).toMatchObject({ trouble: null, waiting: [] })
  })

  it('lets the others go where one is held up by itself, but nothing more of that candidate', async () => {
    const held: SendOutcome = { outcome: 'trouble', sentence: 'No pictures yet.', answered: true }
    const { outbox, sent } = browser().open([held])
    outbox.add(waiting(1))
    outbox.add(waiting(2))
    outbox.add(waiting(1, 'N', { at: 3 }))
    await settled()
    expect(sent).toEqual(['uid-1-A', 'uid-2-A'])
    expect(outbox.snapshot()).toMatchObject({ trouble: { sentence: 'No pictures yet.' } })
    await vi.advanceTimersByTimeAsync(1000)
    expect(sent.slice(2)).toEqual(['uid-1-A', 'uid-1-N'])
    expect(outbox.snapshot()).toMatchObject({ trouble: null, waiting: [] })
  })

  it('holds the rest where a right is gone, and sends all of it when the right is back', async () => {
    const held: SendOutcome = { outcome: 'trouble', sentence: 'There is no campaign.', answered: true }
    const { outbox, sent, refused } = browser().open(Array.from({ length: 6 }, () => held))
    for (let id = 1; id <= 20; id++) outbox.add(waiting(id))
    await settled()
    expect(sent).toHaveLength(3)
    await vi.advanceTimersByTimeAsync(60_000)
    expect(refused).toEqual([])
    expect(outbox.snapshot()).toMatchObject({ trouble: null, waiting: [] })
    expect(new Set(sent).size).toBe(20)
  })

  it('tells of a grade that came late, and does not take it for refused', async () => {
    const { outbox, refused } = browser().open([{ outcome: 'saved', late: true }])
    outbox.add(waiting(1))
    await settled()
    expect(refused).toEqual([])
    expect(outbox.snapshot().refused).toMatchObject([
      { taken: true, sentence: expect.stringMatching(/counts in no verdict/) },
    ])
  })

  it('sends again what was refused when the person asks for it, with the same id, also after a reload', async () => {
    const { disk, open } = browser()
    const first = open([full])
    first.outbox.add(waiting(1))
    await settled()
    first.close()
    const second = open()
    await second.outbox.open()
    second.outbox.sendAgain('uid-1-A')
    await settled()
    expect(second.sent).toEqual(['uid-1-A'])
    expect(second.outbox.snapshot()).toMatchObject({ waiting: [], refused: [] })
    expect([disk.waiting.size, disk.refused.size]).toEqual([0, 0])
  })

  it('shows again what is refused again', async () => {
    const { disk, open } = browser()
    const { outbox, sent } = open([full, full])
    outbox.add(waiting(1))
    await settled()
    outbox.sendAgain('uid-1-A')
    await settled()
    expect(sent).toHaveLength(2)
    expect(outbox.snapshot().refused).toHaveLength(1)
    expect(disk.refused.size).toBe(1)
  })

  it('tries at once when told that the connection is back', async () => {
    const { outbox, sent } = browser().open([trouble])
    outbox.add(waiting(1))
    await settled()
    outbox.flush()
    await settled()
    expect(sent).toHaveLength(2)
    expect(outbox.snapshot().waiting).toEqual([])
  })

  it('sends a correction after what it corrects, also where the clock was set back between them', async () => {
    const { outbox, sent } = browser().open([trouble])
    outbox.add(waiting(1, 'A', { at: 5000 }))
    outbox.add(waiting(1, 'B', { at: 3000, first: false }))
    await vi.advanceTimersByTimeAsync(5000)
    expect([...new Set(sent)]).toEqual(['uid-1-A', 'uid-1-B'])
  })

  it('puts aside what the server refuses, says why, does not send it again and goes on', async () => {
    const { disk, open } = browser()
    const { outbox, sent, refused } = open([full])
    outbox.add(waiting(1))
    outbox.add(waiting(2))
    await vi.advanceTimersByTimeAsync(120_000)
    expect(sent).toEqual(['uid-1-A', 'uid-2-A'])
    expect(refused).toMatchObject([{ candidateId: 1, sentence: 'It is full.' }])
    expect(outbox.snapshot()).toMatchObject({ waiting: [], refused: [{ sentence: 'It is full.' }] })
    outbox.dismiss('uid-1-A')
    await settled()
    expect(outbox.snapshot().refused).toEqual([])
    expect(disk.refused.size).toBe(0)
  })

  it('finds after a reload what was not acknowledged and what was refused, and sends the first in order', async () => {
    const { open } = browser()
    const before = open([full, trouble])
    for (const id of [1, 3, 2]) before.outbox.add(waiting(id, 'A', { at: 10 * id }))
    await settled()
    before.close()
    const after = open()
    await after.outbox.open()
    expect(after.outbox.snapshot().refused).toMatchObject([{ candidateId: 1 }])
    expect(after.found).toEqual([['earlier', [3, 2]]])
    expect(after.refused, 'it was refused before').toEqual([])
    await settled()
    expect(after.sent).toEqual(['uid-3-A', 'uid-2-A'])
  })

  it('says when a first grade replaced one that had been given elsewhere, and says nothing of a correction', async () => {
    const { outbox, refused } = browser().open([
      { outcome: 'saved', replaced: true },
      { outcome: 'saved', replaced: true },
    ])
    outbox.add(waiting(1))
    outbox.add(waiting(2, 'B', { first: false }))
    await settled()
    expect(outbox.snapshot().refused).toMatchObject([{ candidateId: 1, taken: true }])
    expect(outbox.snapshot().refused[0].sentence).toMatch(/^It replaced the grade/)
    expect(refused).toEqual([])
  })
})

describe('two tabs of one person', () => {
  it('send one at a time, each grade once, and both show how many wait', async () => {
    const { open, mostWorking } = browser()
    const first = open([trouble])
    const second = open()
    first.outbox.add(waiting(1))
    second.outbox.add(waiting(2))
    await settled()
    expect(mostWorking()).toBe(1)
    await vi.advanceTimersByTimeAsync(60_000)
    expect([...first.sent, ...second.sent].filter((id) => id === 'uid-2-A')).toHaveLength(1)
    expect(first.outbox.snapshot().waiting).toEqual([])
    expect(second.outbox.snapshot().waiting).toEqual([])
  })

  it('both hear what a candidate is called once its grade is taken, whichever of them sent it', async () => {
    const { open } = browser()
    const first = open([{ outcome: 'saved', called: 'SWS0001' }, { outcome: 'saved' }])
    const second = open()
    first.outbox.add(waiting(1))
    first.outbox.add(waiting(2))
    await settled()
    expect(first.names).toEqual([[1, 'SWS0001']])
    expect(second.names).toEqual([[1, 'SWS0001']])
  })

  it('see what waits in the other', async () => {
    const { open } = browser()
    const troubles = Array.from({ length: 9 }, () => trouble)
    const first = open([...troubles])
    const second = open([...troubles])
    first.outbox.add(waiting(1))
    second.outbox.add(waiting(2))
    await settled()
    for (const { outbox } of [first, second]) expect(outbox.snapshot().waiting).toHaveLength(2)
  })

  it('see it on a slow disk too', async () => {
    const { disk, open } = browser()
    disk.slowMs = 300
    const troubles = Array.from({ length: 9 }, () => trouble)
    const first = open([...troubles])
    const second = open([...troubles])
    first.outbox.add(waiting(1))
    await vi.advanceTimersByTimeAsync(100)
    expect(second.outbox.snapshot().waiting).toEqual([])
    await vi.advanceTimersByTimeAsync(300)
    expect(second.outbox.snapshot().waiting).toHaveLength(1)
  })

  it('tell each other what they graded, so that neither grades it again unawares', async () => {
    const { open } = browser()
    const first = open()
    const second = open()
    first.outbox.add(waiting(1))
    await settled()
    expect(second.found).toEqual([['other tab', [1]]])
    expect(first.found).toEqual([])
  })

  it('both hear of a refusal, whichever of them sent, and both forget it when one has read it', async () => {
    const { open } = browser()
    const first = open([trouble])
    const second = open([full])
    first.outbox.add(waiting(1))
    await settled()
    second.outbox.flush()
    await settled()
    expect(first.refused).toMatchObject([{ candidateId: 1 }])
    expect(first.outbox.snapshot()).toMatchObject({ waiting: [], refused: [{ candidateId: 1 }] })
    first.outbox.dismiss('uid-1-A')
    expect(second.outbox.snapshot().refused).toEqual([])
  })
})

describe('what another person has waiting', () => {
  it('is left alone, in the older storage too', async () => {
    localStorage.setItem('ringside:waiting:south:7:uid-9-A', JSON.stringify(waiting(9)))
    localStorage.setItem('ringside:waiting:north:70:uid-8-A', JSON.stringify(waiting(8)))
    const { outbox, sent } = browser().open()
    await outbox.open()
    await settled()
    expect(sent).toEqual([])
    expect(localStorage).toHaveLength(2)
  })
})

describe('the older storage', () => {
  it('is emptied into the database, and what waited there is sent', async () => {
    localStorage.setItem('ringside:waiting:north:7:uid-9-A', JSON.stringify(waiting(9)))
    localStorage.setItem('ringside:refused:north:7:uid-8-A', JSON.stringify({ ...waiting(8), sentence: 'It is full.' }))
    const { open } = browser()
    const { outbox, sent, found } = open([trouble])
    await outbox.open()
    expect(localStorage).toHaveLength(0)
    expect(found).toEqual([['earlier', [9]]])
    expect(outbox.snapshot()).toMatchObject({ refused: [{ candidateId: 8, sentence: 'It is full.' }] })
    await vi.advanceTimersByTimeAsync(2000)
    expect(sent).toEqual(['uid-9-A', 'uid-9-A'])
  })

  it('keeps what the database does not take', async () => {
    localStorage.setItem('ringside:waiting:north:7:uid-9-A', JSON.stringify(waiting(9)))
    const { disk, open } = browser()
    disk.broken = true
    const { outbox, sent } = open([trouble])
    await outbox.open()
    await settled()
    expect(localStorage).toHaveLength(1)
    expect(outbox.snapshot()).toMatchObject({ kept: false, waiting: [{ candidateId: 9 }] })
    expect(sent).toEqual(['uid-9-A'])
  })
})

describe('a browser that keeps nothing', () => {
  it('still sends, and says that what waits is in this tab only', async () => {
    const { disk, open } = browser()
    disk.broken = true
    const { outbox, sent } = open([trouble, full])
    outbox.add(waiting(1))
    outbox.add(waiting(2))
    await settled()
    expect(outbox.snapshot()).toMatchObject({ kept: false, waiting: { length: 2 } })
    await vi.advanceTimersByTimeAsync(60_000)
    expect(sent).toEqual(['uid-1-A', 'uid-1-A', 'uid-2-A'])
    expect(outbox.snapshot()).toMatchObject({ waiting: [], refused: [{ candidateId: 1 }] })
  })

  it('keeps what waits as soon as there is room again', async () => {
    const { disk, open } = browser()
    disk.broken = true
    const { outbox } = open([trouble, trouble, trouble])
    outbox.add(waiting(1))
    await settled()
    disk.broken = false
    await vi.advanceTimersByTimeAsync(1000)
    expect(outbox.snapshot().kept).toBe(true)
    expect([...disk.waiting.keys()]).toEqual(['uid-1-A'])
  })
})
