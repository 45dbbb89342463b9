import { fireEvent, render, screen, waitFor } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { describe, expect, it } from 'vitest'
import { freshRoom, grades, look, name, open, pause, room, saved, taken } from './_bench-room'
import { benchCandidate, supply } from './_candidates'
import { Bench } from './bench'

freshRoom()

describe('the bench', () => {
  it('grades by key, shows the next at once, confirms, and sends in the background', async () => {
    let release = () => {}
    room.answerGrade = () => new Promise((resolve) => (release = () => resolve(taken())))
    const { user } = await open()
    await user.keyboard('b')
    expect(name()).toBe('SWS-2')
    expect(screen.getByText(/given to/)).toHaveTextContent('given to SWS-1')
    expect(saved()).toBe('1 waiting')
    await waitFor(() => expect(grades()).not.toHaveLength(0))
    release()
    await waitFor(() => expect(saved()).toBe('All grades saved'))
    expect(grades()).toMatchObject([
      { url: '/api/campaigns/north/candidates/1/grade', body: { grade: 'B', tags: [], remark: null, view: 'colour' } },
    ])
    expect(grades()[0].body?.seconds).toBeGreaterThan(0)
    expect(grades()[0].body?.id).toMatch(/^[0-9a-f]{32}$/)
  })

  it('grades by mouse and lets go of the button, so that Space does not press it again', async () => {
    const { user } = await open()
    await user.click(screen.getByRole('button', { name: /^A: Sure/ }))
    await look()
    await user.keyboard(' ')
    expect(name()).toBe('SWS-2')
    expect(grades()).toHaveLength(1)
  })

  it('takes no grade from a key that bounces, is held down, or has a modifier', async () => {
    const { user } = await open()
    await user.keyboard('nn')
    expect(name()).toBe('SWS-2')
    await look()
    await user.keyboard('{Control>}n{/Control}')
    fireEvent.keyDown(window, { key: 'n', repeat: true })
    expect(name()).toBe('SWS-2')
  })

  it('takes no judgement of a picture that has not arrived, but takes cannot judge', async () => {
    const user = userEvent.setup()
    render(
      <Bench slug="north" campaignName="North field" personId={7} lead={false} first={{ ...room.queue, until: '' }} />,
    )
    await pause(140)
    await user.keyboard('a')
    expect(name()).toBe('SWS-1')
    expect(screen.getByText(/still on its way/)).toBeInTheDocument()
    await user.keyboard('u')
    expect(name()).toBe('SWS-2')
  })

  it('types a remark without grading, keeps it on Enter and sends it with the grade', async () => {
    const { user } = await open()
    await user.keyboard('m')
    await user.keyboard('a blue curve, can be N{Shift>}{Enter}{/Shift}x{Enter}')
    expect(name()).toBe('SWS-1')
    expect(grades()).toHaveLength(0)
    expect(screen.queryByRole('textbox')).not.toBeInTheDocument()
    await user.keyboard('a second line')
    expect(grades(), 'whoever types on after Enter means words, not grades').toHaveLength(0)
    await pause(550)
    await user.keyboard('c')
    await waitFor(() => expect(grades()).toHaveLength(1))
    expect(grades()[0].body?.remark).toBe('a blue curve, can be N\nx')
  })

  it('gives the focus back when the remark closes, where Space still blinks and Enter opens the remark again', async () => {
    const { user } = await open()
    await user.keyboard('m')
    await user.keyboard('thin{Escape}')
    const button = screen.getByRole('button', { name: /thin$/ })
    expect(button).toHaveFocus()
    await user.keyboard(' ')
    expect(screen.queryByRole('textbox')).not.toBeInTheDocument()
    await user.keyboard('{Enter}')
    expect(screen.getByRole('textbox')).toHaveFocus()
  })

  it('leaves Space to the remark button when the person went to it', async () => {
    const { user } = await open()
    screen.getByRole('button', { name: /Add a remark/ }).focus()
    await user.keyboard(' ')
    expect(screen.getByRole('textbox')).toHaveFocus()
  })

  it('picks tags by key, and a grade closes the chooser', async () => {
    const { user } = await open()
    await user.keyboard('t13')
    expect(screen.getByRole('button', { name: 'arc', pressed: true })).toBeInTheDocument()
    expect(screen.getByRole('button', { name: /^View 1/, pressed: true })).toBeInTheDocument()
    await user.keyboard('a')
    await waitFor(() => expect(grades()).toHaveLength(1))
    expect(grades()[0].body?.tags).toEqual(['arc', 'two images'])
    expect(screen.getByRole('button', { name: /What do you see/ })).toHaveAttribute('aria-expanded', 'false')
  })

  it('goes back with the given grade marked, corrects it under a new id, and returns', async () => {
    const { user } = await open()
    await user.keyboard('b')
    await look()
    await user.keyboard('z')
    expect(name()).toBe('SWS-1')
    expect(screen.getByRole('button', { name: /^B: / })).toHaveAttribute('aria-pressed', 'true')
    await look()
    await user.keyboard('n')
    expect(name()).toBe('SWS-2')
    await waitFor(() => expect(grades().map(({ body }) => body?.grade)).toEqual(['B', 'N']))
    expect(grades()[0].body?.id).not.toBe(grades()[1].body?.id)
  })

  it('sends nothing when the same grade is given again or kept', async () => {
    const { user } = await open()
    await user.keyboard('b')
    await user.keyboard('z')
    await look()
    await user.keyboard('b')
    await user.keyboard('zk')
    expect(name()).toBe('SWS-2')
    expect(grades()).toHaveLength(1)
  })

  it('says afterwards why a picture could not be judged', async () => {
    const { user } = await open()
    await user.keyboard('uw2')
    await waitFor(() => expect(grades()).toHaveLength(2))
    expect(grades()[1].body).toMatchObject({ grade: 'U', reason: 'too faint' })
    expect(screen.getByText(/given to/)).toHaveTextContent('too faint')
  })

  it('changes views by key and blinks against the one before while X is held', async () => {
    const { user } = await open()
    const shown = () => document.querySelector('figure img[aria-hidden="false"]')?.getAttribute('alt')
    await user.keyboard('2')
    expect(shown()).toBe('SWS-1, deep')
    await user.keyboard('{x>}')
    expect(shown()).toBe('SWS-1, colour')
    await user.keyboard('{/x}')
    expect(shown()).toBe('SWS-1, deep')
  })
})

describe('the end', () => {
  it('says what was done in this sitting and lets one look back', async () => {
    room.queue = supply([1])
    const { user } = await open()
    room.queue = supply([], { given: 1, left: 0 })
    await user.keyboard('a')
    expect(name()).toBe('Nothing is left for you')
    expect(screen.getByText(/^In this sitting you graded one candidate: 1 sure\. You looked for/)).toBeInTheDocument()
    await user.click(screen.getByRole('button', { name: /Look back/ }))
    expect(name()).toBe('SWS-1')
  })

  it('says when the last ones are with other people', async () => {
    room.queue = { ...supply([], { left: 2 }) }
    await open()
    expect(name()).toBe('The last 2 are on other benches')
  })

  it('says when nothing is imaged yet', async () => {
    room.queue = { ...supply([]), imaged: false }
    await open()
    expect(name()).toBe('No pictures to grade yet')
  })

  it('takes only cannot judge for a candidate without pictures', async () => {
    const bare = benchCandidate(1)
    bare.views = bare.views.map((view) => ({ ...view, url: null }))
    room.queue = { ...supply([]), candidates: [bare], left: 1 }
    const { user } = await open()
    await user.keyboard('a')
    expect(name()).toBe('SWS-1')
    await user.keyboard('u')
    await waitFor(() => expect(grades()).toHaveLength(1))
  })

  it('gives back on leaving what was not graded', async () => {
    const { user, unmount } = await open()
    await user.keyboard('a')
    unmount()
    await waitFor(() =>
      expect(room.sent.at(-1)).toMatchObject({ method: 'DELETE', url: '/api/campaigns/north/queue?candidates=2,3' }),
    )
  })
})
