import { act, screen, waitFor, within } from '@testing-library/react'
import { describe, expect, it, vi } from 'vitest'
import { firstName, look, newest, open, progress, server, stamps, eachWithSheetServer } from './_sheet-room'
import { PAGE } from './sheet-session'

eachWithSheetServer()

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
