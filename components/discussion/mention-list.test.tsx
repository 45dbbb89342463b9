import { render, screen } from '@testing-library/react'
import { describe, expect, it } from 'vitest'
import type { Mention } from '@/lib/work/discussion/list-mentions'
import { MentionList } from './mention-list'

const mention = (messageId: number, more: Partial<Mention> = {}): Mention => ({
  messageId,
  candidateId: 7,
  candidate: 'SWS0007',
  at: '2026-12-01T12:00:00.000Z',
  unread: true,
  message: { by: 'G01', text: 'What do you say, @G02?' },
  ...more,
})

describe('mentions', () => {
  it('are counted while unread and lead to their discussion', () => {
    render(<MentionList slug="north" mentions={[mention(2), mention(1, { unread: false })]} />)
    expect(screen.getByRole('heading', { name: '1 unread mention' })).toBeVisible()
    const [first, second] = screen.getAllByRole('link')
    expect(first).toHaveAttribute('href', '/campaigns/north/candidates/7#discussion')
    expect(first).toHaveTextContent('unread, G01')
    expect(second).not.toHaveTextContent('unread')
  })

  it('tell nothing of a message whose candidate is to be graded first', () => {
    render(<MentionList slug="north" mentions={[mention(2, { message: null })]} />)
    expect(screen.getByRole('link')).toHaveTextContent('opens once you have graded the candidate yourself')
    expect(screen.queryByText(/G01|What do you say/)).toBeNull()
  })

  it('say what they are for where there are none', () => {
    render(<MentionList slug="north" mentions={[]} />)
    expect(screen.getByRole('heading', { name: 'Nobody has mentioned you' })).toBeVisible()
  })
})
