import { NextRequest } from 'next/server'
import { beforeEach, describe, expect, it, vi } from 'vitest'
import { route } from './route'

vi.mock('@/lib/platform/database', () => ({ database: async () => ({}) }))
vi.mock('@/lib/work/people/session', () => ({ getViewer: async () => null }))

const handler = vi.fn(async () => Response.json({ done: true }))
const POST = route({ handler })

function post(headers: Record<string, string>): Promise<Response> {
  const request = new NextRequest('http://ringside.test:3000/api/x', { method: 'POST', headers })
  return POST(request, { params: Promise.resolve({}) })
}

beforeEach(() => handler.mockClear())

describe('a route that changes something', () => {
  it.each([
    [{ host: 'ringside.test:3000', origin: 'http://ringside.test:3000', 'sec-fetch-site': 'same-origin' }],
    [{ host: 'ringside.test:3000', origin: 'http://ringside.test:3000' }],
    [{ host: 'ringside.test:3000' }],
  ])('takes a change from its own pages and from scripts: %j', async (headers) => {
    expect((await post(headers)).status).toBe(200)
    expect(handler).toHaveBeenCalledOnce()
  })

  it.each([
    [{ host: 'ringside.test:3000', 'sec-fetch-site': 'cross-site' }],
    [{ host: 'ringside.test:3000', 'sec-fetch-site': 'same-site' }],
    [{ host: 'ringside.test:3000', origin: 'http://other.test' }],
    [{ host: 'ringside.test:3000', origin: 'http://ringside.test:4000' }],
    [{ host: 'ringside.test:3000', origin: 'null' }],
  ])('refuses a change that another site sends with the cookie of a visitor: %j', async (headers) => {
    const response = await post(headers)
    expect(response.status).toBe(403)
    expect(await response.json()).toMatchObject({ type: 'urn:ringside:problem:forbidden' })
    expect(handler).not.toHaveBeenCalled()
  })
})
