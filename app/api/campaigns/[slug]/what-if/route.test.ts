import { gunzipSync } from 'node:zlib'
import { NextRequest } from 'next/server'
import { beforeEach, describe, expect, it, vi } from 'vitest'
import { giveGrades } from '@/lib/work/consensus/_give-grade'
import { decodeWhatIf } from '@/lib/work/consensus/what-if-columns'
import type { Viewer } from '@/lib/work/people/viewer'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'

let scenario: Scenario
let viewer: Viewer | null
let id: number

vi.mock('@/lib/platform/database', () => ({ database: async () => scenario.db }))
vi.mock('@/lib/work/people/session', () => ({ getViewer: async () => viewer }))

beforeEach(async () => {
  scenario = await makeScenario({ gradesWanted: 4, leastGrades: 3 })
  id = await addImagedCandidate(scenario.db, scenario.campaign, 'one')
  await giveGrades(scenario.db, scenario.campaign, id, scenario.graders, 'AAB')
})

async function get(path = '') {
  const { slug } = scenario.campaign
  const { GET } = path ? await import('./candidates/route') : await import('./route')
  const request = new NextRequest(`http://x.test/api/campaigns/${slug}/what-if${path}`)
  return GET(request, { params: Promise.resolve({ slug }) })
}

const REFUSED = [
  ['somebody signed out', 401, () => null],
  ['a grader', 403, () => scenario.graders[0]],
  ['a viewer', 403, () => scenario.reader],
  ['somebody outside the campaign', 404, () => scenario.stranger],
] as const

describe('GET /api/campaigns/{slug}/what-if', () => {
  it('answers a lead the numbers of every candidate as a gzip file that nothing keeps', async () => {
    viewer = scenario.lead
    const response = await get()
    expect(response.headers.get('content-type')).toBe('application/gzip')
    expect(response.headers.get('cache-control')).toBe('private, no-store')
    const columns = decodeWhatIf(new Uint8Array(gunzipSync(Buffer.from(await response.arrayBuffer()))))
    expect([...columns.ids]).toEqual([id])
    expect(columns.tallies.points[0]).toBe(8)
  })

  it.each(REFUSED)('refuses %s with a problem document', async (_, status, who) => {
    viewer = who()
    const response = await get()
    expect(response.status).toBe(status)
    expect(await response.json()).toMatchObject({ status, detail: expect.any(String) })
  })
})

describe('GET /api/campaigns/{slug}/what-if/candidates', () => {
  it('answers a lead the names of the candidates asked for', async () => {
    viewer = scenario.lead
    const response = await get(`/candidates?ids=${id}`)
    expect(await response.json()).toEqual({ candidates: [{ id, name: 'one', thumbnail: null }] })
  })

  it.each(['', '?ids=', '?ids=1;2', `?ids=${'1,'.repeat(100)}1`])('refuses %s with what to send', async (query) => {
    viewer = scenario.lead
    const response = await get(`/candidates${query}`)
    expect(response.status).toBe(422)
    expect(JSON.stringify(await response.json())).toContain('Name one to 100 candidates')
  })

  it.each(REFUSED)('refuses %s with a problem document', async (_, status, who) => {
    viewer = who()
    const response = await get(`/candidates?ids=${id}`)
    expect(response.status).toBe(status)
    expect(await response.json()).toMatchObject({ status, detail: expect.any(String) })
  })
})
