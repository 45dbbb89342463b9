import { act, render, screen, waitFor, within } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import type { SheetStamp } from '@/lib/work/sheet/lend-sheet'
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
const server = { total: 0, marks: [] as SentMark[], down: false, refuse: null as string | null, given: 0 }

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
  Object.assign(server, { total: 150, marks: [], down: false, refuse: null, given: 0 })
  localStorage.clear()
  vi.stubGlobal('fetch', async (url: string, init: RequestInit = {}) => {
    if (server.down) throw new TypeError('down')
    if (init.method === 'DELETE') return Response.json({})
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
afterEach(() => void vi.unstubAllGlobals())

const open = () => {
  const shown = render(<Sheet slug="north" campaignName="North" personId={7} first={lent(2 * PAGE)} />)
  return { user: userEvent.setup(), ...shown }
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
    const { user, unmount } = open()
    server.down = true
    await user.keyboard('snn')
    expect(await screen.findByRole('alert')).toHaveTextContent('The server cannot be reached. 60 marks are kept here')
    unmount()
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
