import { screen, waitFor, within } from '@testing-library/react'
import { beforeAll, beforeEach, describe, expect, it, vi } from 'vitest'
import { freshRoom, grades, look, name, open, pause, refusal, room, saved, taken } from './_bench-room'
import { supply } from './_candidates'
import { waitingGrade } from './_memory-store'

freshRoom()
// What the page fetches when it is first opened.
beforeAll(() => import('./refused-grades'))

function warnsOnLeaving(): boolean {
  const leaving = new Event('beforeunload', { cancelable: true })
  window.dispatchEvent(leaving)
  return leaving.defaultPrevented
}

describe('a grade on its way', () => {
  it('tries again after a failure and never loses the grade', async () => {
    let failures = 1
    room.answerGrade = () => (failures-- > 0 ? new Response(null, { status: 503 }) : taken())
    const { user } = await open()
    await user.keyboard('a')
    await waitFor(() => expect(saved()).toMatch(/^1 waiting\. The server has trouble/))
    expect(warnsOnLeaving(), 'the browser keeps it').toBe(false)
    await waitFor(() => expect(saved()).toBe('All grades saved'), { timeout: 3000 })
    expect(grades()[0].body?.id).toBe(grades()[1].body?.id)
  })

  it('says where the browser keeps nothing, and then warns on leaving while something waits', async () => {
    vi.stubGlobal('indexedDB', undefined)
    room.answerGrade = () => new Response(null, { status: 503 })
    const { user } = await open()
    expect(warnsOnLeaving()).toBe(false)
    await user.keyboard('a')
    await waitFor(() => expect(saved()).toMatch(/^1 waiting.*keeps nothing for this site/))
    expect(warnsOnLeaving()).toBe(true)
    room.answerGrade = () => taken()
    await waitFor(() => expect(saved()).toBe('All grades saved'), { timeout: 3000 })
    expect(warnsOnLeaving()).toBe(false)
  })

  it('waits with a way to sign in and come back when the session has run out', async () => {
    room.answerGrade = () => refusal('signed-out', '', 401)
    const { user } = await open()
    await user.keyboard('a')
    const link = await screen.findByRole('link', { name: /Sign in/ })
    expect(link).toHaveAttribute('href', '/signin?next=%2Fcampaigns%2Fnorth%2Fbench')
    expect(saved()).toMatch(/^1 waiting\. You are signed out/)
    room.answerGrade = () => taken()
    await waitFor(() => expect(saved()).toBe('All grades saved'), { timeout: 3000 })
    expect(screen.queryByRole('link', { name: /Sign in/ })).not.toBeInTheDocument()
  })

  it('shows the name of a candidate that the server tells with its answer, there and when one looks back', async () => {
    room.answerGrade = () => Response.json({ called: 'Curlew 7', grade: { id: 'x' } })
    const { user } = await open()
    const spoken = () => document.querySelector('[aria-live]')?.textContent
    await user.keyboard('a')
    const before = spoken()
    expect(await screen.findByText('Curlew 7')).toBeVisible()
    expect(name()).toBe('SWS-2')
    expect(spoken()).toBe(before)
    await user.keyboard('z')
    expect(name()).toBe('Curlew 7')
  })

  it('leaves the name as it was where the answer tells none', async () => {
    const { user } = await open()
    await user.keyboard('a')
    await waitFor(() => expect(saved()).toBe('All grades saved'))
    expect(screen.getByText('SWS-1')).toBeVisible()
  })

  it('says that a first grade replaced one given on another device', async () => {
    room.answerGrade = () => taken('other-id')
    const { user } = await open()
    await user.keyboard('a')
    await user.click(await screen.findByRole('button', { name: '1 came with a note' }))
    const told = await screen.findByRole('dialog')
    expect(told).toHaveTextContent(/SWS-1, your A: It replaced the grade that you had given/)
    expect(within(told).queryByRole('button', { name: 'Send it again' })).not.toBeInTheDocument()
  })

  it('says of one that came late what became of it, and goes on counting it as given', async () => {
    room.answerGrade = () => Response.json({ grade: { id: 'x' }, late: true })
    const { user } = await open()
    await user.keyboard('a')
    await user.click(await screen.findByRole('button', { name: '1 came with a note' }))
    expect(await screen.findByRole('dialog')).toHaveTextContent(/It came when this candidate had all its looks/)
    expect(document.querySelector('[role=progressbar]')).toHaveAttribute('aria-valuenow', '1')
  })

  it('after a reload sends what was left and does not show its candidate again, whatever the server lends', async () => {
    room.answerGrade = () => new Response(null, { status: 503 })
    const { user, close } = await open()
    await user.keyboard('a')
    await waitFor(() => expect(saved()).toMatch(/^1 waiting/))
    close()
    let release = () => {}
    room.answerGrade = () => new Promise((resolve) => (release = () => resolve(taken())))
    await open()
    expect(name()).toBe('SWS-2')
    expect(screen.getByRole('progressbar')).toHaveAttribute('aria-valuetext', '1 of 3')
    await waitFor(() => expect(grades()).not.toHaveLength(0))
    release()
    await waitFor(() => expect(saved()).toBe('All grades saved'))
    expect(new Set(grades().map(({ body }) => body?.id)).size).toBe(1)
  })

  it('shows in words what the server refused, and does not count it', async () => {
    const detail = 'Others have filled this candidate.'
    room.answerGrade = () => refusal('candidate-full', detail)
    const { user } = await open()
    await user.keyboard('a')
    const line = await screen.findByRole('button', { name: '1 grade was not taken' })
    expect(screen.getByRole('alert')).toHaveTextContent('1 grade was not taken.')
    expect(screen.getByRole('progressbar')).toHaveAttribute('aria-valuenow', '0')
    await user.click(line)
    const told = await screen.findByRole('dialog')
    expect(told).toHaveTextContent(`SWS-1, your A: ${detail}`)
    await user.click(within(told).getByRole('button', { name: 'I have read this' }))
    expect(screen.queryByRole('dialog')).not.toBeInTheDocument()
    expect(screen.queryByRole('button', { name: /not taken/ })).not.toBeInTheDocument()
    expect(grades()).toHaveLength(1)
  })

  it('is sent again when the person asks for it, and counts then', async () => {
    room.answerGrade = () => refusal('candidate-full', 'Others have filled this candidate.')
    const { user } = await open()
    await user.keyboard('a')
    await user.click(await screen.findByRole('button', { name: '1 grade was not taken' }))
    room.answerGrade = () => taken()
    await user.click(within(await screen.findByRole('dialog')).getByRole('button', { name: 'Send it again' }))
    await waitFor(() => expect(grades()).toHaveLength(2))
    expect(grades()[1].body?.id).toBe(grades()[0].body?.id)
    await waitFor(() => expect(screen.queryByRole('button', { name: /not taken/ })).not.toBeInTheDocument())
  })

  it('shows in words why a correction was refused, goes on, and looks back at what stands', async () => {
    const detail = "You have seen the others' grades of this candidate since, so yours stands as you gave it."
    const { user } = await open()
    await user.keyboard('a')
    await waitFor(() => expect(saved()).toBe('All grades saved'))
    await look()
    room.queue = supply([2, 3], { given: 1, left: 2 })
    room.answerGrade = () => refusal('judgement-seen', detail)
    await user.keyboard('z')
    await look()
    await user.keyboard('n')
    await user.click(await screen.findByRole('button', { name: '1 grade was not taken' }))
    expect(await screen.findByRole('dialog')).toHaveTextContent(`SWS-1, your N: ${detail}`)
    await user.keyboard('{Escape}')
    expect(name()).toBe('SWS-2')
    expect(screen.getByRole('progressbar')).toHaveAttribute('aria-valuenow', '1')
    await user.keyboard('z')
    await waitFor(() =>
      expect(screen.getByRole('button', { name: /^A: Sure/ })).toHaveAttribute('aria-pressed', 'true'),
    )
  })

  it('says whose it is with everything it sends', async () => {
    const { user, unmount } = await open()
    await user.keyboard('a')
    unmount()
    await waitFor(() => expect(room.sent.at(-1)?.method).toBe('DELETE'))
    expect(new Set(room.sent.map(({ method }) => method))).toEqual(new Set(['GET', 'PUT', 'DELETE']))
    expect(new Set(room.sent.map(({ person }) => person))).toEqual(new Set(['7']))
  })

  it('keeps a grade, with a sentence, while somebody else is signed in, and sends it when the person is back', async () => {
    room.answerGrade = () => refusal('other-person', '')
    const { user } = await open()
    await user.keyboard('a')
    await waitFor(() => expect(saved()).toMatch(/^1 waiting\. Somebody else has signed in in this browser/))
    expect(screen.getByRole('alert')).toBeEmptyDOMElement()
    room.answerGrade = () => taken()
    await waitFor(() => expect(saved()).toBe('All grades saved'), { timeout: 3000 })
  })
})

describe('a grade whose bench was left by a link', () => {
  it.each([
    ['keeps it', () => {}],
    ['keeps nothing', () => vi.stubGlobal('indexedDB', undefined)],
  ])('goes on from the next page in a browser that %s, and its candidate does not come again', async (_, browser) => {
    browser()
    let down = true
    room.answerGrade = () => (down ? new Response(null, { status: 503 }) : taken())
    const { user, unmount } = await open()
    await user.keyboard('a')
    await waitFor(() => expect(saved()).toMatch(/^1 waiting/))
    unmount()
    down = false
    const before = grades().length
    await waitFor(() => expect(grades().length).toBeGreaterThan(before), { timeout: 4000 })
    room.queue = supply([2, 3], { given: 1, left: 2 })
    await open()
    expect(name()).toBe('SWS-2')
    expect(saved()).toBe('All grades saved')
  })

  it('is still waiting when one comes back to the bench before it has gone', async () => {
    room.answerGrade = () => new Response(null, { status: 503 })
    const { user, unmount } = await open()
    await user.keyboard('a')
    await waitFor(() => expect(saved()).toMatch(/^1 waiting/))
    unmount()
    await open()
    expect(name()).toBe('SWS-2')
    expect(saved()).toMatch(/^1 waiting/)
    expect(screen.getByRole('progressbar')).toHaveAttribute('aria-valuetext', '1 of 3')
  })
})

describe('a second tab', () => {
  const tell = (grade: unknown) => {
    const tab = new BroadcastChannel('ringside-outbox:north:7')
    tab.postMessage({ tell: 'gave', grade })
    setTimeout(() => tab.close(), 50)
  }

  it('that grades what is on the stage here takes it away, and this one says so', async () => {
    await open()
    tell(waitingGrade(1, 'C'))
    await waitFor(() => expect(name()).toBe('SWS-2'))
    expect(screen.getByText('You gave SWS-1 its C in another tab.')).toBeInTheDocument()
    expect(grades()).toHaveLength(0)
  })

  it('that corrects what was graded here shows its answer when one looks back', async () => {
    const { user } = await open()
    await user.keyboard('a')
    tell(waitingGrade(1, 'N', { first: false, at: Date.now() + 1000 }))
    await look()
    await user.keyboard('z')
    await waitFor(() => expect(screen.getByRole('button', { name: /^N: / })).toHaveAttribute('aria-pressed', 'true'))
  })
})

describe('after a reload', () => {
  beforeEach(() => {
    room.standing = { answer: { id: 'x', grade: 'A', tags: [], reason: null, remark: null }, open: true }
  })

  async function gradeTwoAndReload() {
    const { user, close } = await open()
    await user.keyboard('a')
    await look()
    await user.keyboard('b')
    await waitFor(() => expect(saved()).toBe('All grades saved'))
    close()
    room.queue = supply([3], { given: 2, left: 1 })
    const again = await open()
    await pause(60)
    return again
  }

  it('undo goes on to where the sitting began, and a correction is sent', async () => {
    const { user } = await gradeTwoAndReload()
    expect(name()).toBe('SWS-3')
    await user.keyboard('z')
    expect(name()).toBe('SWS-2')
    await user.keyboard('z')
    await look()
    expect(name()).toBe('SWS-1')
    expect(screen.getByRole('button', { name: /^A: / })).toHaveAttribute('aria-pressed', 'true')
    await user.keyboard('n')
    await waitFor(() => expect(grades().at(-1)).toMatchObject({ body: { grade: 'N' } }))
    expect(grades().at(-1)?.url).toBe('/api/campaigns/north/candidates/1/grade')
    expect(name()).toBe('SWS-3')
  })

  it('shows what stands at the server where that was changed elsewhere', async () => {
    room.standing = { answer: { id: 'y', grade: 'C', tags: [], reason: null, remark: 'seen again' }, open: true }
    const { user } = await gradeTwoAndReload()
    await user.keyboard('z')
    await waitFor(() => expect(screen.getByRole('button', { name: /^C: / })).toHaveAttribute('aria-pressed', 'true'))
    expect(screen.getByText(/changed this grade elsewhere/)).toBeInTheDocument()
  })

  it('says that a grade stands where the others’ have been seen since', async () => {
    room.standing = { answer: { id: 'x', grade: 'B', tags: [], reason: null, remark: null }, open: false }
    const { user } = await gradeTwoAndReload()
    await user.keyboard('z')
    expect(await screen.findByText(/so yours stands as it is/)).toBeInTheDocument()
  })

  it('words and tags that were not sent are there again, and their candidate is not given back', async () => {
    const { user, close } = await open()
    await user.keyboard('mthin arc{Enter}')
    await user.keyboard('t1t')
    close()
    await waitFor(() =>
      expect(room.sent.at(-1)).toMatchObject({ method: 'DELETE', url: expect.stringMatching(/=2,3$/) }),
    )
    const again = await open()
    await screen.findByRole('button', { name: /thin arc$/ })
    await again.user.keyboard('a')
    await waitFor(() => expect(grades()[0]?.body).toMatchObject({ remark: 'thin arc', tags: ['arc'] }))
    again.unmount()
    expect(Object.keys(localStorage).filter((key) => key.includes('draft'))).toEqual([])
  })

  it('begins a new sitting after some hours', async () => {
    const { user, close } = await open()
    await user.keyboard('a')
    await waitFor(() => expect(saved()).toBe('All grades saved'))
    close()
    const now = Date.now()
    vi.spyOn(Date, 'now').mockReturnValue(now + 5 * 3_600_000)
    room.queue = supply([2, 3], { given: 1 })
    const again = await open()
    await again.user.keyboard('z')
    vi.mocked(Date.now).mockRestore()
    expect(name()).toBe('SWS-2')
  })
})
