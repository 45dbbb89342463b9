import { NextRequest } from 'next/server'
import { beforeEach, describe, expect, it, vi } from 'vitest'
import { giveGrades } from '@/lib/work/consensus/_give-grade'
import type { Viewer } from '@/lib/work/people/viewer'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'

let scenario: Scenario
let viewer: Viewer | null

vi.mock('@/lib/platform/database', () => ({ database: async () => scenario.db }))
vi.mock('@/lib/work/people/session', () => ({ getViewer: async () => viewer }))

beforeEach(async () => {
  scenario = await makeScenario({ gradesWanted: 4, leastGrades: 3 })
  const id = await addImagedCandidate(scenario.db, scenario.campaign, 'one')
  await giveGrades(scenario.db, scenario.campaign, id, scenario.graders, 'AAB')
})

async function post(slug: string, headers: Record<string, string> = {}) {
  const { POST } = await import('./route')
  const request = new NextRequest(`http://x.test/api/campaigns/${slug}/consensus`, { method: 'POST', headers })
  const response = await POST(request, { params: Promise.resolve({ slug }) })
  return { status: response.status, body: (await response.json()) as Record<string, unknown> }
}

describe('POST /api/campaigns/{slug}/consensus', () => {
  it('answers a lead the summary of the run, and the same run when nothing has changed', async () => {
    viewer = scenario.lead
    const first = await post(scenario.campaign.slug)
    expect(first.status).toBe(200)
    expect(first.body).toMatchObject({ unchanged: false, rule: 1, candidates: 1, grades: 3, confirmed: 1, changed: 1 })
    const second = await post(scenario.campaign.slug)
    expect(second.body).toEqual({ ...first.body, unchanged: true })
  })

  it.each([
    ['somebody signed out', 401, () => null],
    ['a grader', 403, () => scenario.graders[0]],
    ['a viewer', 403, () => scenario.reader],
    ['somebody outside the campaign', 404, () => scenario.stranger],
  ])('refuses %s with a problem document and runs nothing', async (_, status, who) => {
    viewer = who()
    const answer = await post(scenario.campaign.slug)
    expect(answer).toMatchObject({ status, body: { status, detail: expect.any(String) } })
    expect(await scenario.db.selectFrom('run').selectAll().execute()).toEqual([])
  })

  it('refuses a request that another site makes with the cookie of a lead', async () => {
    viewer = scenario.lead
    expect(await post(scenario.campaign.slug, { 'sec-fetch-site': 'cross-site' })).toMatchObject({ status: 403 })
    expect(await scenario.db.selectFrom('run').selectAll().execute()).toEqual([])
  })
})
