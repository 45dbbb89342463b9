import { render, screen, waitFor } from '@testing-library/react'
import { SWRConfig } from 'swr'
import { afterEach, expect, it, vi } from 'vitest'
import { WaitingLine } from './waiting-line'

vi.mock('next/navigation', () => ({ usePathname: () => '/campaigns/north' }))
afterEach(() => vi.unstubAllGlobals())

function show(answer: { asked: number; mentions: number } | null, initial = { asked: 0, mentions: 0 }) {
  vi.stubGlobal('fetch', async () => (answer ? Response.json(answer) : new Response('', { status: 500 })))
  render(
    <SWRConfig value={{ provider: () => new Map(), shouldRetryOnError: false }}>
      <WaitingLine home="/campaigns/north" url="/api/campaigns/north/waiting" initial={initial} />
    </SWRConfig>,
  )
}

it('leads to the bench for looks asked and to the mentions for unread ones, and keeps up', async () => {
  show({ asked: 2, mentions: 1 })
  expect(await screen.findByRole('link', { name: '2 looks asked of you' })).toHaveAttribute(
    'href',
    '/campaigns/north/bench',
  )
  expect(screen.getByRole('link', { name: '1 unread mention' })).toHaveAttribute('href', '/campaigns/north/mentions')
})

it('is silent where nothing waits', async () => {
  show({ asked: 0, mentions: 0 }, { asked: 1, mentions: 0 })
  await waitFor(() => expect(screen.queryByRole('link')).toBeNull())
})

it('keeps what the page came with while the server does not answer', async () => {
  show(null, { asked: 1, mentions: 0 })
  await new Promise((resolve) => setTimeout(resolve, 20))
  expect(screen.getByRole('link', { name: '1 look asked of you' })).toBeVisible()
})
