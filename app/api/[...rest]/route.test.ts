import { NextRequest } from 'next/server'
import { expect, it, vi } from 'vitest'
import * as rest from './route'

vi.mock('@/lib/platform/database', () => ({ database: async () => ({}) }))
vi.mock('@/lib/work/people/session', () => ({ getViewer: async () => null }))

it.each(['GET', 'POST', 'PUT', 'PATCH', 'DELETE', 'OPTIONS'] as const)(
  'answers %s at an unknown address with a problem document that names it',
  async (method) => {
    const request = new NextRequest('http://ringside.test/api/campains', { method })
    const response = await rest[method](request, { params: Promise.resolve({}) })
    expect(response.status).toBe(404)
    expect(response.headers.get('content-type')).toBe('application/problem+json')
    expect(await response.json()).toMatchObject({
      type: 'urn:ringside:problem:no-such-address',
      detail: expect.stringContaining('/api/campains'),
    })
  },
)
