import { IDBFactory } from 'fake-indexeddb'
import 'fake-indexeddb/auto'
import { afterEach, beforeEach, expect, it, vi } from 'vitest'
import { benchCandidate } from './_candidates'
import { waitingGrade } from './_memory-store'
import { BenchStore } from './bench-store'

beforeEach(() => void vi.stubGlobal('indexedDB', new IDBFactory()))
afterEach(() => void vi.unstubAllGlobals())

const ids = async (store: BenchStore) => (await store.grades()).waiting.map(({ body }) => body.id)
const look = (id: number, at: number) => ({
  candidate: benchCandidate(id),
  answer: { grade: 'A' as const, tags: [], remark: '', reason: null },
  view: null,
  seconds: 1,
  at,
})

it('keeps grades and looks for the next page, and forgets what it is told to', async () => {
  const store = new BenchStore('north:7')
  await store.keepWaiting([waitingGrade(1), waitingGrade(2)])
  await store.keepLook(look(2, 20))
  await store.keepLook(look(1, 10))
  await store.close()
  const next = new BenchStore('north:7')
  expect(await ids(next)).toEqual(['uid-1-A', 'uid-2-A'])
  expect((await next.looks()).map(({ candidate }) => candidate.id)).toEqual([1, 2])
  await next.forget('waiting', 'uid-1-A')
  await next.forgetLook(look(1, 10))
  expect(await ids(next)).toEqual(['uid-2-A'])
  expect(await next.looks()).toHaveLength(1)
  await next.forgetLooks()
  expect(await next.looks()).toEqual([])
})

it('moves a refused grade out of the line in one step', async () => {
  const store = new BenchStore('north:7')
  await store.keepWaiting([waitingGrade(1)])
  await store.keepRefused([{ ...waitingGrade(1), sentence: 'It is full.' }])
  expect(await store.grades()).toMatchObject({ waiting: [], refused: [{ candidateId: 1, sentence: 'It is full.' }] })
})

it('tells campaigns and people apart, whose names begin alike too', async () => {
  for (const scope of ['north:7', 'north:70', 'north', 'south:7']) {
    await new BenchStore(scope).keepWaiting([waitingGrade(scope.length)])
  }
  expect(await ids(new BenchStore('north:7'))).toEqual(['uid-7-A'])
})

it('says that a browser keeps nothing, and works once it does', async () => {
  vi.stubGlobal('indexedDB', {
    open: () => {
      throw new DOMException('no', 'SecurityError')
    },
  })
  const store = new BenchStore('north:7')
  await expect(store.keepWaiting([waitingGrade(1)])).rejects.toThrow('no')
  vi.stubGlobal('indexedDB', new IDBFactory())
  await store.keepWaiting([waitingGrade(1)])
  expect(await ids(store)).toEqual(['uid-1-A'])
})
