import { act, fireEvent, render, screen, within } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { IDBFactory } from 'fake-indexeddb'
import 'fake-indexeddb/auto'
import { afterEach, beforeEach, vi } from 'vitest'
import type { SheetStamp } from '@/lib/work/sheet/lend-sheet'
import { closeMarkOutboxes } from './mark-outboxes'
import { Sheet } from './sheet'
import { PAGE } from './sheet-session'

interface SentMark {
  id: string
  candidate: number
  mark: string
}

const stampOf = (id: number): SheetStamp => ({
  id,
  name: `SWS${String(id).padStart(4, '0')}`,
  views: ['Colour', 'Deep'].map((label) => ({
    key: label.toLowerCase(),
    label,
    url: `/stamps/${id}-${label}`,
    width: 100,
    height: 100,
  })),
})

/** A server that keeps what it is told, and gives what has no mark. */
export const server = {
  total: 0,
  marks: [] as SentMark[],
  down: false,
  refuse: null as string | null,
  answer: null as Response | null,
  asked: 0,
  givenBack: [] as number[],
}

export const progress = () => {
  const newest = new Map(server.marks.map(({ candidate, mark }) => [candidate, mark]))
  const of = (mark: string) => [...newest.values()].filter((one) => one === mark).length
  return { waiting: server.total - of('sent on') - of('dropped'), sentOn: of('sent on'), dropped: of('dropped') }
}

const shown = () => ({ toCome: progress().waiting, passedPercent: 50 })

function lent(count: number) {
  const newest = new Map(server.marks.map(({ candidate, mark }) => [candidate, mark]))
  const ids = Array.from({ length: server.total }, (_, n) => n + 1)
  const left = ids.filter((id) => (newest.get(id) ?? 'taken back') === 'taken back')
  return { stamps: left.slice(0, count).map(stampOf), until: '', progress: shown() }
}

/** A fresh server and browser before each test. */
export function eachWithSheetServer(): void {
  beforeEach(() => {
    Object.assign(server, { total: 150, marks: [], down: false, refuse: null, answer: null, asked: 0, givenBack: [] })
    localStorage.clear()
    sessionStorage.clear()
    vi.stubGlobal('indexedDB', new IDBFactory())
    vi.stubGlobal('fetch', async (url: string, init: RequestInit = {}) => {
      if (server.down) throw new TypeError('down')
      if (init.method === 'DELETE') {
        server.givenBack = (new URL(url, 'http://x').searchParams.get('candidates') ?? '').split(',').map(Number)
        return Response.json({})
      }
      if (init.method !== 'POST') server.asked++
      if (init.method === 'POST' && server.answer) return server.answer.clone()
      if (init.method !== 'POST') return Response.json(lent(Number(new URL(url, 'http://x').searchParams.get('count'))))
      const { marks } = JSON.parse(String(init.body)) as { marks: SentMark[] }
      if (server.refuse) {
        return Response.json({
          saved: [],
          refused: marks.map(({ id }) => ({ id, sentence: server.refuse })),
          progress: shown(),
        })
      }
      const known = new Set(server.marks.map(({ id }) => id))
      server.marks.push(...marks.filter(({ id }) => !known.has(id)))
      return Response.json({ saved: marks.map(({ id }) => id), refused: [], progress: shown() })
    })
  })
  afterEach(() => {
    closeMarkOutboxes()
    vi.unstubAllGlobals()
  })
}

/** Every picture of the page comes. */
export const look = (most = PAGE) =>
  act(() => {
    for (const image of [...document.querySelectorAll('ul img')].slice(0, most)) fireEvent.load(image)
  })
export const open = ({ pictures = true } = {}) => {
  const shown = render(<Sheet slug="north" campaignName="North" personId={7} first={lent(2 * PAGE)} />)
  if (pictures) look()
  const close = () => {
    shown.unmount()
    closeMarkOutboxes()
  }
  return { user: userEvent.setup(), close, ...shown }
}
export const stamps = () => within(screen.getByRole('list')).getAllByRole('button', { name: /send on$/ })
export const firstName = () => stamps()[0].getAttribute('aria-label')
export const newest = (candidate: number) => server.marks.filter((mark) => mark.candidate === candidate).at(-1)?.mark
