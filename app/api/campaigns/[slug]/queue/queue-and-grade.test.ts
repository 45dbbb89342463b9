import { NextRequest } from 'next/server'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { candidateNumber } from '@/lib/work/campaigns/candidate-number'
import type { Viewer } from '@/lib/work/people/viewer'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { PUT as putGrade } from '../candidates/[id]/grade/route'
import { DELETE as deleteQueue, GET as getQueue } from './route'

const session = vi.hoisted(() => ({ viewer: null as Viewer | null, db: null as unknown }))
vi.mock('@/lib/work/people/session', () => ({ getViewer: async () => session.viewer }))
vi.mock('@/lib/platform/database', () => ({ database: async () => session.db }))

let scenario: Scenario
let ids: number[]
beforeEach(async () => {
  scenario = await makeScenario({ gradesWanted: 2, leastGrades: 2 })
  session.db = scenario.db
  ids = []
  for (const name of ['SWS-1', 'SWS-2']) ids.push(await addImagedCandidate(scenario.db, scenario.campaign, name))
})
afterEach(() => scenario.db.destroy())

const at = (query = '', init: { method?: string; body?: string; headers?: Record<string, string> } = {}) =>
  new NextRequest(`http://ringside.test/api${query}`, init)

function queue(handler: typeof getQueue, viewer: Viewer | null, query = '', method = 'GET') {
  session.viewer = viewer
  return handler(at(query, { method }), { params: Promise.resolve({ slug: scenario.campaign.slug }) })
}

function grade(viewer: Viewer | null, id: number | string, body: string, headers: Record<string, string> = {}) {
  session.viewer = viewer
  const params = Promise.resolve({ slug: scenario.campaign.slug, id: String(id) })
  return putGrade(at('', { method: 'PUT', body, headers }), { params })
}

describe('GET queue', () => {
  it('lends to a grader and to a lead as many as asked for, and is never kept by a cache', async () => {
    for (const [viewer, name] of [
      [scenario.graders[0], candidateNumber(ids[0])],
      [scenario.lead, 'SWS-1'],
    ] as const) {
      const response = await queue(getQueue, viewer, '?count=1')
      expect(response.headers.get('cache-control')).toBe('no-store')
      expect(await response.json()).toMatchObject({ candidates: [{ id: ids[0], name }], left: 2, given: 0 })
    }
  })

  it('answers 401 to the signed out, 403 to a viewer, 404 to a stranger, and lends them nothing', async () => {
    expect((await queue(getQueue, null)).status).toBe(401)
    expect((await queue(getQueue, scenario.reader)).status).toBe(403)
    expect((await queue(getQueue, scenario.stranger)).status).toBe(404)
    expect(await scenario.db.selectFrom('lease').selectAll().execute()).toEqual([])
  })

  it.each(['?count=0', '?count=61', '?count=x', '?county=5'])('refuses %s', async (query) => {
    expect((await queue(getQueue, scenario.graders[0], query)).status).toBe(422)
  })
})

describe('DELETE queue', () => {
  it('gives back the named candidates, and then all', async () => {
    const [grader] = scenario.graders
    await queue(getQueue, grader, '?count=2')
    const named = await queue(deleteQueue, grader, `?candidates=${ids[1]}`, 'DELETE')
    expect(await named.json()).toEqual({ returned: 1 })
    expect(await (await queue(deleteQueue, grader, '', 'DELETE')).json()).toEqual({ returned: 1 })
  })

  it('is refused to viewers, strangers and with nonsense', async () => {
    expect((await queue(deleteQueue, scenario.reader, '', 'DELETE')).status).toBe(403)
    expect((await queue(deleteQueue, scenario.stranger, '', 'DELETE')).status).toBe(404)
    expect((await queue(deleteQueue, scenario.graders[0], '?candidates=1;2', 'DELETE')).status).toBe(422)
  })
})

describe('PUT grade', () => {
  it('answers the standing grade, and the same for a repeated call', async () => {
    const body = JSON.stringify({ grade: 'A', tags: ['arc'] })
    const first = await (await grade(scenario.graders[0], ids[0], body)).json()
    expect(first).toMatchObject({ grade: { grade: 'A', tags: ['arc'] } })
    expect(await (await grade(scenario.graders[0], ids[0], body)).json()).toEqual(first)
    // Counts of the whole campaign come with the queue: a grade costs the same however large the campaign is.
    expect(Object.keys(first)).toEqual(['called', 'grade'])
    expect(await (await queue(getQueue, scenario.graders[0])).json()).toMatchObject({ given: 1, left: 1 })
  })

  it('answers 401 to the signed out, 403 to a viewer, 404 to a stranger', async () => {
    const body = '{"grade":"A"}'
    expect((await grade(null, ids[0], body)).status).toBe(401)
    expect((await grade(scenario.reader, ids[0], body)).status).toBe(403)
    expect((await grade(scenario.stranger, ids[0], body)).status).toBe(404)
    expect(await scenario.db.selectFrom('grade').selectAll().execute()).toEqual([])
  })

  it('refuses nonsense with the name of what is wrong, and what another site sends', async () => {
    const [grader] = scenario.graders
    const unknown = await grade(grader, ids[0], '{"grade":"A","remarks":"x"}')
    expect([unknown.status, (await unknown.json()).detail]).toEqual([422, expect.stringContaining('remarks')])
    expect((await grade(grader, ids[0], '{"grade":"E"}')).status).toBe(422)
    expect((await grade(grader, ids[0], 'A')).status).toBe(400)
    expect((await grade(grader, 'x', '{"grade":"A"}')).status).toBe(422)
    expect((await grade(grader, 999, '{"grade":"A"}')).status).toBe(404)
    expect((await grade(grader, ids[0], '{"grade":"A"}', { 'sec-fetch-site': 'cross-site' })).status).toBe(403)
  })
})

describe('a page of somebody else', () => {
  const [asGrader, asOther] = [() => String(scenario.graders[0].id), () => String(scenario.graders[1].id)]
  const call = (handler: typeof getQueue, method: string, person: string) => {
    session.viewer = scenario.graders[0]
    const params = Promise.resolve({ slug: scenario.campaign.slug })
    return handler(at('', { method, headers: { 'ringside-person': person } }), { params })
  }

  it('neither grades, nor borrows, nor gives back in the name of who is signed in now', async () => {
    await call(getQueue, 'GET', asGrader())
    const refused = await grade(scenario.graders[0], ids[0], '{"grade":"A"}', { 'ringside-person': asOther() })
    expect([refused.status, (await refused.json()).type]).toEqual([409, 'urn:ringside:problem:other-person'])
    expect((await call(deleteQueue, 'DELETE', asOther())).status).toBe(409)
    expect((await call(getQueue, 'GET', asOther())).status).toBe(409)
    expect(await scenario.db.selectFrom('grade').selectAll().execute()).toEqual([])
    expect(await scenario.db.selectFrom('lease').selectAll().execute()).toHaveLength(2)
  })

  it('that is their own grades', async () => {
    const taken = await grade(scenario.graders[0], ids[0], '{"grade":"A"}', { 'ringside-person': asGrader() })
    expect(taken.status).toBe(200)
  })
})
