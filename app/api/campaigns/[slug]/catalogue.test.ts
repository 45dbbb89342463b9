import { NextRequest } from 'next/server'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import type { Viewer } from '@/lib/work/people/viewer'
import { addJudgedCandidate } from '@/tests/_support/judged-candidate'
import { makeScenario, type Scenario } from '@/tests/_support/scenario'
import { GET as getCandidates } from './candidates/route'
import { GET as getCsv } from './catalogue.csv/route'
import { GET as getVotable } from './catalogue.vot/route'

const session = vi.hoisted(() => ({ viewer: null as Viewer | null, db: null as unknown }))
vi.mock('@/lib/work/people/session', () => ({ getViewer: async () => session.viewer }))
vi.mock('@/lib/platform/database', () => ({ database: async () => session.db }))

let scenario: Scenario
beforeEach(async () => {
  scenario = await makeScenario({ gradesWanted: 4, leastGrades: 3 })
  session.db = scenario.db
  await addJudgedCandidate(scenario, 'lens', { grades: 'AAA ' })
})
afterEach(() => scenario.db.destroy())

function ask(get: typeof getCsv, viewer: Viewer | null, query = '') {
  session.viewer = viewer
  const params = Promise.resolve({ slug: scenario.campaign.slug })
  return get(new NextRequest(`http://ringside.test/api${query}`), { params })
}

describe('GET candidates', () => {
  it('answers one page with the cursor of the next', async () => {
    const response = await ask(getCandidates, scenario.lead, '?limit=1')
    expect(response.status).toBe(200)
    expect(await response.json()).toMatchObject({
      candidates: [{ name: 'lens', state: 'confirmed' }],
      nextCursor: null,
    })
  })

  it.each(['?limit=0', '?limit=501', '?limit=x', '?cursor=17', '?state=nowhere', '?sort=mean'])(
    'refuses %s with a sentence and the name of what is wrong',
    async (query) => {
      const response = await ask(getCandidates, scenario.lead, query)
      expect(response.status).toBe(422)
      const problem = await response.json()
      expect(problem.type).toBe('urn:ringside:problem:invalid')
      expect(problem.invalid_params).toHaveLength(1)
    },
  )

  it('asks who is there, and does not tell strangers that the campaign exists', async () => {
    expect((await ask(getCandidates, null)).status).toBe(401)
    expect((await ask(getCandidates, scenario.stranger)).status).toBe(404)
  })
})

describe.each([
  ['catalogue.csv', getCsv, 'text/csv; charset=utf-8; header=present'],
  ['catalogue.vot', getVotable, 'application/x-votable+xml'],
] as const)('GET %s', (_name, get, contentType) => {
  it('gives viewers and leads the file', async () => {
    for (const viewer of [scenario.reader, scenario.lead]) {
      const response = await ask(get, viewer)
      expect(response.status).toBe(200)
      expect(response.headers.get('content-type')).toBe(contentType)
      expect(await response.text()).toContain('lens')
    }
  })

  it('refuses graders with the reason, and the signed out and strangers', async () => {
    const response = await ask(get, scenario.graders[0])
    expect(response.status).toBe(403)
    expect((await response.json()).detail).toContain('graders cannot download it')
    expect((await ask(get, null)).status).toBe(401)
    expect((await ask(get, scenario.stranger)).status).toBe(404)
  })
})
