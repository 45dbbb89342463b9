import { act, fireEvent, render, screen } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { IDBFactory } from 'fake-indexeddb'
import 'fake-indexeddb/auto'
import { afterEach, beforeEach, vi } from 'vitest'
import { supply } from './_candidates'
import { Bench } from './bench'
import { closeOutboxes } from './outboxes'

interface Sent {
  url: string
  method: string
  body: Record<string, unknown> | null
  person: string | null
}

/** The server has taken a grade. */
export const taken = (replaced?: string) => Response.json({ grade: { id: 'x' }, replaced })

/** The server understood and said no. */
export const refusal = (type: string, detail: string, status = 409) =>
  Response.json({ type: `urn:ringside:problem:${type}`, detail }, { status })

/** A server that answers as a test says, and all that was sent to it. */
export const room = {
  sent: [] as Sent[],
  queue: supply([1, 2, 3]),
  answerGrade: (): Response | Promise<Response> => taken(),
  /** What stands of one's own, for a bench that looks back. */
  standing: { answer: null, open: true } as unknown,
}

/** Before each test of a file an empty browser and a server that takes everything. */
export function freshRoom(): void {
  beforeEach(() => {
    room.sent = []
    room.queue = supply([1, 2, 3])
    room.answerGrade = () => taken()
    localStorage.clear()
    vi.stubGlobal('indexedDB', new IDBFactory())
    vi.stubGlobal('fetch', async (url: string, init: RequestInit = {}) => {
      const method = init.method ?? 'GET'
      const body = init.body ? (JSON.parse(String(init.body)) as Record<string, unknown>) : null
      room.sent.push({ url, method, body, person: new Headers(init.headers).get('ringside-person') })
      if (method === 'PUT') return room.answerGrade()
      if (url.endsWith('/grade')) return Response.json(room.standing)
      return Response.json(method === 'GET' ? { ...room.queue, until: '' } : {})
    })
  })
  afterEach(() => {
    closeOutboxes()
    vi.unstubAllGlobals()
  })
}

export const grades = () => room.sent.filter(({ method }) => method === 'PUT')
export const name = () => screen.getByRole('heading', { level: 1 }).textContent
export const saved = () => document.querySelector('[data-save-line]')?.textContent
export const pause = (milliseconds: number) => act(() => new Promise((resolve) => setTimeout(resolve, milliseconds)))

/** Pictures arrive, and longer passes than a key takes to bounce. */
export async function look(): Promise<void> {
  for (const image of document.querySelectorAll('figure img')) fireEvent.load(image)
  await pause(140)
}

export async function open(first = room.queue) {
  const user = userEvent.setup()
  const view = render(
    <Bench slug="north" campaignName="North field" personId={7} lead={false} first={{ ...first, until: '' }} />,
  )
  await look()
  return {
    user,
    ...view,
    /** As when the page is closed, and nothing of it lives on. */
    close: () => {
      view.unmount()
      closeOutboxes()
    },
  }
}
