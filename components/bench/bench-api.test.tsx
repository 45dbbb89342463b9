import { afterEach, describe, expect, it, vi } from 'vitest'
import { waitingGrade } from './_memory-store'
import { sendGrade } from './bench-api'

afterEach(() => void vi.unstubAllGlobals())

async function send(answer: () => Response | Promise<Response>) {
  const call = vi.fn(answer)
  vi.stubGlobal('fetch', call)
  return sendGrade({ slug: 'north', personId: 7 }, 1, waitingGrade(1).body)
}
const problem = (type: string, status: number) => () =>
  Response.json({ type: `urn:ringside:problem:${type}`, detail: 'The sentence of the server.' }, { status })

describe('a grade that was sent', () => {
  it('is saved when the server says which grade stands', async () => {
    expect(await send(() => Response.json({ grade: { id: 'x' } }))).toEqual({
      outcome: 'saved',
      replaced: false,
      late: false,
    })
    expect(await send(() => Response.json({ grade: { id: 'x' }, late: true }))).toMatchObject({ late: true })
    expect(await send(() => Response.json({ grade: { id: 'x' }, replaced: 'y' }))).toMatchObject({ replaced: true })
  })

  it('asks to be kept where its candidate has all its looks by now', async () => {
    const call = vi.fn(() => Response.json({ grade: { id: 'x' } }))
    await send(call)
    expect(JSON.parse((call.mock.calls as unknown as [string, RequestInit][])[0][1].body as string)).toMatchObject({
      late: true,
    })
  })

  it('is refused for good only in the words of Ringside, and for what it is itself', async () => {
    expect(await send(problem('candidate-full', 409))).toEqual({
      outcome: 'refused',
      sentence: 'The sentence of the server.',
    })
    expect(await send(problem('invalid', 422))).toMatchObject({ outcome: 'refused' })
  })

  it('is refused for good where the candidate is gone, but not where the campaign is', async () => {
    vi.stubGlobal('fetch', vi.fn())
    const gone = problem('not-found', 404)
    const where = (campaign: () => Response) => {
      let first = true
      return () => {
        const answer = first ? gone() : campaign()
        first = false
        return Promise.resolve(answer)
      }
    }
    expect(await send(where(() => Response.json({})))).toMatchObject({ outcome: 'refused' })
    expect(await send(where(gone))).toMatchObject({ outcome: 'trouble', answered: true })
  })

  it.each([
    ['a page that a network puts in between', () => new Response('<html>Welcome to the hotel</html>')],
    ['JSON of something else', () => Response.json({ ok: true })],
    ['a refusal of something else', () => new Response('Forbidden', { status: 403 })],
    ['a page that is not found while the site is renewed', () => new Response('<html></html>', { status: 404 })],
    ['trouble of the server', () => new Response(null, { status: 503 })],
    ['too many requests', () => new Response(null, { status: 429 })],
    ['somebody else who has signed in', problem('other-person', 409)],
    ['a right that was taken and may be given back', () => Promise.resolve(problem('not-found', 404)())],
    ['a proxy that hides where a page is from', problem('forbidden', 403)],
    ['a candidate that has no pictures yet', problem('not-imaged', 409)],
    ['nothing at all', () => Promise.reject(new TypeError('network'))],
  ])('is kept and tried again after %s', async (_, answer) => {
    expect(await send(answer)).toMatchObject({ outcome: 'trouble' })
  })

  it('waits for signing in where the session has run out', async () => {
    expect(await send(problem('signed-out', 401))).toMatchObject({ outcome: 'trouble', signIn: true })
  })
})
