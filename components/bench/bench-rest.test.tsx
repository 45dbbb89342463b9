import { screen, waitFor } from '@testing-library/react'
import { afterEach, describe, expect, it, vi } from 'vitest'
import { freshRoom, grades, look, name, open, room } from './_bench-room'
import { supply } from './_candidates'

freshRoom()
afterEach(() => void vi.restoreAllMocks())

describe('the end of a sitting', () => {
  it('comes when the person says so, sums it up without a ranking, and goes on where it stopped', async () => {
    const { user } = await open()
    await user.keyboard('a')
    await user.keyboard('e')
    expect(name()).toBe('Thank you for looking')
    expect(screen.getByText(/^In this sitting you graded one candidate: 1 sure\./)).toBeInTheDocument()
    expect(document.body.textContent).not.toMatch(/rank|than others|average|leader/i)
    await user.keyboard('n')
    await waitFor(() => expect(grades()).toHaveLength(1))
    await user.click(screen.getByRole('button', { name: /Go on grading/ }))
    expect(name()).toBe('SWS-2')
  })

  it('says how many grades are still on their way', async () => {
    room.answerGrade = () => new Response(null, { status: 503 })
    const { user } = await open()
    await user.keyboard('a')
    await user.click(screen.getByRole('button', { name: /Finish/ }))
    expect(screen.getByText(/^One grade is still on the way/)).toBeInTheDocument()
  })
})

describe('a break', () => {
  const OFFER = 'You have looked for a long while. A few minutes away rest the eyes.'

  /** Grades one candidate every four minutes by the clock, for an hour. */
  async function gradeForAnHour() {
    room.queue = supply(Array.from({ length: 18 }, (_, index) => index + 1))
    const { user } = await open()
    const begun = Date.now()
    for (let minute = 0; minute <= 52; minute += 4) {
      vi.spyOn(Date, 'now').mockReturnValue(begun + minute * 60_000)
      await user.keyboard('n')
      await look()
    }
    return user
  }

  it('is offered after a long stretch, lets grades through, and is declined with Esc', async () => {
    const user = await gradeForAnHour()
    expect(screen.getByText(OFFER)).toBeInTheDocument()
    const before = name()
    await user.keyboard('c')
    expect(name()).not.toBe(before)
    expect(screen.getByText(OFFER)).toBeInTheDocument()
    await user.keyboard('{Escape}')
    expect(screen.queryByText(OFFER)).not.toBeInTheDocument()
  })

  it('is taken by key', async () => {
    const user = await gradeForAnHour()
    await user.keyboard('e')
    expect(name()).toBe('Thank you for looking')
  })

  it('is not offered again to somebody who took it, nor after a reload', async () => {
    const user = await gradeForAnHour()
    await user.keyboard('e')
    await user.click(screen.getByRole('button', { name: /Go on grading/ }))
    expect(screen.queryByText(OFFER)).not.toBeInTheDocument()
    await user.keyboard('n')
    await look()
    expect(screen.queryByText(OFFER)).not.toBeInTheDocument()
  })
})
