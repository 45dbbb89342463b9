import { screen, waitFor } from '@testing-library/react'
import { describe, expect, it } from 'vitest'
import { firstName, look, newest, open, progress, server, stamps, eachWithSheetServer } from './_sheet-room'
import { PAGE } from './sheet-session'

eachWithSheetServer()

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
