import { act, cleanup, render, screen, waitFor } from '@testing-library/react'
import { IDBFactory } from 'fake-indexeddb'
import 'fake-indexeddb/auto'
import { afterEach, beforeAll, beforeEach, expect, it, vi } from 'vitest'
import { waitingGrade } from './_memory-store'
import { BenchStore } from './bench-store'
import { closeOutboxes } from './outboxes'
import { WaitingNotice } from './waiting-notice'

const refresh = vi.fn()
vi.mock('next/navigation', () => ({ useRouter: () => ({ refresh }) }))

let sent: string[]
let answer: () => Response

// What the page fetches once it has been shown.
beforeAll(() => import('./waiting-elsewhere'))
beforeEach(() => {
  sent = []
  refresh.mockClear()
  answer = () => Response.json({ grade: { id: 'x' } })
  localStorage.clear()
  vi.stubGlobal('indexedDB', new IDBFactory())
  vi.stubGlobal('fetch', async (url: string) => {
    sent.push(url)
    return answer()
  })
})
afterEach(() => {
  cleanup()
  closeOutboxes()
  vi.unstubAllGlobals()
})

async function left(scope: string, ...ids: number[]): Promise<void> {
  const store = new BenchStore(scope)
  await store.keepWaiting(ids.map((id) => waitingGrade(id)))
  await store.close()
}

it('sends what waits of the person in any campaign from a page that is not the bench, and then the page counts anew', async () => {
  await left('north:7', 1, 2)
  await left('south:7', 3)
  render(<WaitingNotice personId={7} />)
  expect(await screen.findByText('All 3 grades that waited in this browser arrived.')).toBeInTheDocument()
  expect(sent.sort()).toEqual(
    [1, 2, 3].map((id) => `/api/campaigns/${id === 3 ? 'south' : 'north'}/candidates/${id}/grade`),
  )
  await waitFor(() => expect(refresh).toHaveBeenCalledOnce())
})

it('says how many wait and why while they cannot go', async () => {
  await left('north:7', 1, 2)
  answer = () => new Response(null, { status: 503 })
  render(<WaitingNotice personId={7} />)
  expect(
    await screen.findByText(/2 grades of yours wait in this browser.*The server has trouble just now\./),
  ).toBeInTheDocument()
  expect(refresh).not.toHaveBeenCalled()
})

it('tells that grades of somebody else wait, sends none of them, and says nothing where nothing waits', async () => {
  await left('north:8', 1)
  render(<WaitingNotice personId={7} />)
  expect(await screen.findByText(/Grades of somebody else wait in this browser/)).toBeInTheDocument()
  expect(sent).toEqual([])
  cleanup()
  vi.stubGlobal('indexedDB', new IDBFactory())
  const { container } = render(<WaitingNotice personId={7} />)
  await act(() => new Promise((resolve) => setTimeout(resolve, 50)))
  expect(container).toBeEmptyDOMElement()
})
