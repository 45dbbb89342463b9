import { act, fireEvent, render, screen, waitFor, within } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { IDBFactory } from 'fake-indexeddb'
import 'fake-indexeddb/auto'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
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
const server = {
  total: 0,
  marks: [] as SentMark[],
  down: false,
  refuse: null as string | null,
  answer: null as Response | null,
  asked: 0,
  givenBack: [] as number[],
}

const progress = () => {
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

/** Every picture of the page comes. */
const look = (most = PAGE) =>
  act(() => {
    for (const image of [...document.querySelectorAll('ul img')].slice(0, most)) fireEvent.load(image)
  })
const open = ({ pictures = true } = {}) => {
  const shown = render(<Sheet slug="north" campaignName="North" personId={7} first={lent(2 * PAGE)} />)
  if (pictures) look()
  const close = () => {
    shown.unmount()
    closeMarkOutboxes()
  }
  return { user: userEvent.setup(), close, ...shown }
}
const stamps = () => within(screen.getByRole('list')).getAllByRole('button', { name: /send on$/ })
const firstName = () => stamps()[0].getAttribute('aria-label')
const newest = (candidate: number) => server.marks.filter((mark) => mark.candidate === candidate).at(-1)?.mark

describe('the sheet', () => {
  it('shows a page of stamps of which the arrows choose one and S sends it on and takes it back', async () => {
    const { user } = open()
    expect(stamps()).toHaveLength(PAGE)
    await user.keyboard('{ArrowRight}{ArrowRight}s')
    await waitFor(() => expect(stamps()[2]).toHaveFocus())
    expect(stamps()[2]).toHaveAttribute('aria-pressed', 'true')
    await waitFor(() => expect(newest(3)).toBe('sent on'))
    await user.keyboard('s')
    await waitFor(() => expect(newest(3)).toBe('taken back'))
    expect(stamps()[2]).toHaveAttribute('aria-pressed', 'false')
  })

  it('sends on by a click or a touch, and by Space on the stamp in focus', async () => {
    const { user } = open()
    await user.click(stamps()[4])
    await user.keyboard('{ArrowLeft}')
    await waitFor(() => expect(stamps()[3]).toHaveFocus())
    await user.keyboard(' ')
    await waitFor(() => expect([newest(5), newest(4)]).toEqual(['sent on', 'sent on']))
  })

  it('drops the rest of the page only when it is confirmed, and goes on to the next', async () => {
    const { user } = open()
    await user.keyboard('sn')
    expect(screen.getByText('59 stamps go no further, 1 to the bench.')).toBeVisible()
    await user.keyboard('{Escape}')
    expect(server.marks.some(({ mark }) => mark === 'dropped')).toBe(false)
    await user.keyboard('nn')
    expect(firstName()).toBe('SWS0061, send on')
    await waitFor(() => expect(progress()).toEqual({ waiting: 90, sentOn: 1, dropped: 59 }))
    await waitFor(() =>
      expect(screen.getByText(/to come/)).toHaveTextContent('90 to come; 1 sent on and 59 dropped in this sitting'),
    )
  })

  it('brings the page back with Z, what was sent on still sent on, and takes the drops back', async () => {
    const { user } = open()
    await user.keyboard('snn')
    await waitFor(() => expect(progress().dropped).toBe(59))
    await user.keyboard('z')
    expect(firstName()).toBe('SWS0001, send on')
    expect(stamps()[0]).toHaveAttribute('aria-pressed', 'true')
    await waitFor(() => expect(progress()).toEqual({ waiting: 149, sentOn: 1, dropped: 0 }))
    await user.keyboard('z')
    expect(firstName(), 'there is no page before').toBe('SWS0001, send on')
  })

  it('goes through to the end, and says so', async () => {
    const { user } = open()
    for (let page = 0; page < 3; page++) {
      look()
      await user.keyboard('nn')
      await act(() => new Promise((resolve) => setTimeout(resolve, 30)))
    }
    expect(await screen.findByRole('heading', { name: 'The first pass is through' })).toBeVisible()
    await waitFor(() => expect(progress()).toEqual({ waiting: 0, sentOn: 0, dropped: 150 }))
    expect(new Set(server.marks.map(({ candidate }) => candidate)).size).toBe(server.marks.length)
  })

  it('enlarges a stamp, where views, arrows and S go on working', async () => {
    const { user } = open()
    await user.keyboard('e')
    const peek = await screen.findByRole('dialog', { name: 'SWS0001' })
    await user.keyboard('2')
    expect(within(peek).getByRole('img')).toHaveAttribute('src', '/stamps/1-Deep')
    await user.keyboard('{ArrowRight}s')
    expect(await screen.findByRole('dialog', { name: 'SWS0002' })).toBeVisible()
    await waitFor(() => expect(newest(2)).toBe('sent on'))
    await user.keyboard('n')
    expect(screen.queryByText(/go no further/), 'nothing is dropped from here').toBeNull()
    await user.keyboard('{Escape}')
    expect(screen.queryByRole('dialog')).toBeNull()
    await waitFor(() => expect(stamps()[1]).toHaveFocus())
  })

  it('hears no letters while single keys are off, though buttons and arrows work', async () => {
    const { user } = open()
    await user.click(screen.getByRole('switch'))
    stamps()[0].focus()
    await user.keyboard('s')
    expect(server.marks).toEqual([])
    await user.keyboard('{ArrowRight}')
    await waitFor(() => expect(stamps()[1]).toHaveFocus())
    await user.keyboard(' ')
    await waitFor(() => expect(newest(2)).toBe('sent on'))
    await user.click(screen.getByRole('button', { name: /Drop the other 59/ }))
    await user.click(screen.getByRole('button', { name: /^Drop 59/ }))
    await waitFor(() => expect(progress().dropped).toBe(59))
  })
})

describe('marks on their way', () => {
  it('are kept while the server is away, told by number, and arrive once after a reload', async () => {
    const { user, close } = open()
    server.down = true
    await user.keyboard('snn')
    expect(await screen.findByRole('alert')).toHaveTextContent('The server cannot be reached. 60 marks are kept here')
    close()
    server.down = false
    open()
    await waitFor(() => expect(progress()).toEqual({ waiting: 90, sentOn: 1, dropped: 59 }))
    expect(new Set(server.marks.map(({ id }) => id)).size).toBe(60)
    expect(localStorage).toHaveLength(0)
  })

  it('say why where the server refuses one', async () => {
    server.refuse = 'There is no such candidate with pictures in this campaign.'
    const { user } = open()
    await user.keyboard('s')
    expect(await screen.findByRole('alert')).toHaveTextContent('A mark was not taken: There is no such candidate')
  })
})

describe('what nobody has seen', () => {
  it('is not dropped while no picture has come', async () => {
    const { user } = open({ pictures: false })
    await user.keyboard('nn')
    expect(firstName()).toBe('SWS0001, send on')
    expect(screen.getByText('None of this page have been seen yet.')).toBeVisible()
    expect(screen.getByRole('button', { name: /^Next page/ })).toBeDisabled()
    expect(server.marks).toEqual([])
  })

  it('stays for the next page, and is told by number', async () => {
    const { user } = open({ pictures: false })
    look(57)
    await user.keyboard('n')
    expect(
      screen.getByText(/57 stamps go no further, 0 to the bench. 3 not seen yet stay for the next page/),
    ).toBeVisible()
    await user.keyboard('n')
    expect(firstName()).toBe('SWS0058, send on')
    await waitFor(() => expect(progress().dropped).toBe(57))
  })

  it('is what lay outside the window, though its picture came', async () => {
    const callbacks: IntersectionObserverCallback[] = []
    const elements: Element[] = []
    vi.stubGlobal(
      'IntersectionObserver',
      class {
        constructor(callback: IntersectionObserverCallback) {
          callbacks.push(callback)
        }
        observe(element: Element) {
          elements.push(element)
        }
        unobserve() {}
        disconnect() {}
      },
    )
    const { user } = open()
    await user.keyboard('nn')
    expect(server.marks).toEqual([])
    const entries = elements.slice(0, 20).map((target) => ({ target, intersectionRatio: 1 }))
    act(() => callbacks[0](entries as unknown as IntersectionObserverEntry[], {} as IntersectionObserver))
    await user.keyboard('nn')
    await waitFor(() => expect(progress().dropped).toBe(20))
  })

  it('can be sent on all the same', async () => {
    const { user } = open({ pictures: false })
    await user.keyboard('s')
    await waitFor(() => expect(newest(1)).toBe('sent on'))
  })
})

describe('the next page', () => {
  it('is asked for again by itself after an outage, and at once when the network is back', async () => {
    const { user } = open()
    await waitFor(() => expect(server.asked).toBeGreaterThan(0))
    server.down = true
    await user.keyboard('nn')
    look()
    await user.keyboard('nn')
    expect(await screen.findByRole('heading', { name: 'The next page has not come' })).toBeVisible()
    expect(screen.getByText(/The server cannot be reached. It is asked for again/)).toBeVisible()
    server.down = false
    window.dispatchEvent(new Event('online'))
    await waitFor(() => expect(firstName()).toBe('SWS0121, send on'))
  })

  it('gives back what is not marked when the sheet is left by a link', async () => {
    const { user, unmount } = open()
    await user.keyboard('s')
    await waitFor(() => expect(newest(1)).toBe('sent on'))
    unmount()
    await waitFor(() => expect(server.givenBack.length).toBeGreaterThanOrEqual(2 * PAGE - 1))
    expect(server.givenBack).not.toContain(1)
  })
})

describe('after a reload', () => {
  it('Z brings back the page that was dropped before it, and the sums go on', async () => {
    const { user, close } = open()
    await user.keyboard('snn')
    await waitFor(() => expect(progress()).toEqual({ waiting: 90, sentOn: 1, dropped: 59 }))
    close()
    const again = open()
    await waitFor(() =>
      expect(screen.getByText(/to come/)).toHaveTextContent('90 to come; 1 sent on and 59 dropped in this sitting'),
    )
    await again.user.keyboard('z')
    expect(firstName()).toBe('SWS0001, send on')
    expect(stamps()[0]).toHaveAttribute('aria-pressed', 'true')
    await waitFor(() => expect(progress()).toEqual({ waiting: 149, sentOn: 1, dropped: 0 }))
  })
})

describe('marks that cannot go', () => {
  const problem = (status: number, type: string, detail: string) =>
    Response.json({ type: `urn:ringside:problem:${type}`, detail }, { status })

  it('wait with a way to sign in where the session has run out', async () => {
    server.answer = problem(401, 'sign-in-needed', '')
    const { user } = open()
    await user.keyboard('s')
    expect(await screen.findByRole('link', { name: 'Sign in and come back here' })).toHaveAttribute(
      'href',
      '/signin?next=%2Fcampaigns%2Fnorth%2Fsheet',
    )
  })

  it('wait while the right to the sheet is gone', async () => {
    server.answer = problem(403, 'forbidden', 'The first pass is made by people whom a lead picks.')
    const { user } = open()
    await user.keyboard('s')
    expect(await screen.findByRole('alert')).toHaveTextContent('made by people whom a lead picks. 1 mark is kept here')
    server.answer = null
    window.dispatchEvent(new Event('online'))
    await waitFor(() => expect(newest(1)).toBe('sent on'))
  })

  it('go although one of an earlier version cannot be read', async () => {
    localStorage.setItem('ringside:sheet:north:7:broken', '{')
    localStorage.setItem(
      'ringside:sheet:north:7:whole',
      JSON.stringify({ id: 'mark-0001', candidate: 5, mark: 'sent on', order: 1 }),
    )
    open()
    await waitFor(() => expect(newest(5)).toBe('sent on'))
    expect(localStorage.getItem('ringside:sheet:north:7:whole')).toBeNull()
  })

  it('go in the order in which they were made, whichever tab made them', async () => {
    server.down = true
    const first = open()
    await first.user.keyboard('s')
    await screen.findByRole('alert')
    first.close()
    const second = open()
    await waitFor(() => expect(screen.getByText(/1 mark on the way/)).toBeInTheDocument())
    await second.user.keyboard('{ArrowRight}s')
    server.down = false
    window.dispatchEvent(new Event('online'))
    await waitFor(() => expect(server.marks.map(({ candidate }) => candidate)).toEqual([1, 2]))
  })
})
