import { beforeAll, describe, expect, it } from 'vitest'
import { z } from 'zod'
import { log } from '@/lib/platform/log'
import { conflict } from '@/lib/platform/problems/problem'
import { problemResponse } from './problem-response'

beforeAll(() => {
  log.level = 'silent'
})

describe('problemResponse', () => {
  it('is an RFC 9457 document with a stable type, a sentence and the number of the request', async () => {
    const response = problemResponse(conflict('full', 'This candidate has all its grades.'), 'r-1')
    expect(response.status).toBe(409)
    expect(response.headers.get('content-type')).toBe('application/problem+json')
    expect(await response.json()).toEqual({
      type: 'urn:ringside:problem:full',
      title: 'full',
      status: 409,
      detail: 'This candidate has all its grades.',
      requestId: 'r-1',
    })
  })

  it('names each field that zod refused', async () => {
    const { error } = z.object({ grade: z.enum(['A', 'B']) }).safeParse({ grade: 'Z' })
    const body = await problemResponse(error).json()
    expect(body.status).toBe(422)
    expect(body.invalid_params).toMatchObject([{ name: 'grade' }])
  })

  it('tells nothing of an unforeseen error but where it is logged', async () => {
    const response = problemResponse(new Error('SELECT secret FROM person'), 'r-2')
    const text = await response.text()
    expect(response.status).toBe(500)
    expect(text).not.toContain('SELECT')
    expect(text).not.toContain('problem-response.test')
    expect(text).toContain('r-2')
  })
})
