import { NextRequest } from 'next/server'
import { beforeEach, describe, expect, it, vi } from 'vitest'
import { defaultRecipe } from '@/lib/science/imaging/recipe'
import type { Viewer } from '@/lib/work/people/viewer'
import { makeScenario, type Scenario } from '@/tests/_support/scenario'

let scenario: Scenario
let viewer: Viewer | null

vi.mock('@/lib/platform/database', () => ({ database: async () => scenario.db }))
vi.mock('@/lib/work/people/session', () => ({ getViewer: async () => viewer }))

beforeEach(async () => {
  scenario = await makeScenario()
  viewer = scenario.lead
})

const OTHER = { ...defaultRecipe(['g', 'r', 'i']), northUp: true }
const recipes = () =>
  scenario.db.selectFrom('recipe').select('version').where('campaign_id', '=', scenario.campaign.id).execute()

async function send(body?: unknown, headers: Record<string, string> = {}) {
  const { GET, POST } = await import('./route')
  const slug = scenario.campaign.slug
  const address = `http://x.test/api/campaigns/${slug}/recipes`
  const context = { params: Promise.resolve({ slug }) }
  const response =
    body === undefined
      ? await GET(new NextRequest(address, { headers }), context)
      : await POST(new NextRequest(address, { method: 'POST', headers, body: JSON.stringify(body) }), context)
  return { status: response.status, body: (await response.json()) as Record<string, unknown> }
}

describe('the address of the recipe', () => {
  it('takes a changed recipe, tells all versions, and takes an earlier one again', async () => {
    expect(await send({ after: 1, recipe: OTHER })).toMatchObject({ status: 201, body: { version: 2 } })
    expect(await send({ after: 2, again: 1 })).toMatchObject({ status: 201, body: { version: 3 } })
    expect((await send()).body).toMatchObject({
      versions: [{ version: 3 }, { version: 2, recipe: { northUp: true } }, { version: 1 }],
      progress: { version: 3, candidates: 0, imaged: 0, working: true },
    })
  })

  it.each([
    ['a recipe without views', { after: 1, recipe: { ...OTHER, views: [] } }, 'views'],
    ['neither a recipe nor a version', { after: 1 }, 'recipe'],
    ['both', { after: 1, recipe: OTHER, again: 1 }, 'recipe'],
    ['no version that it began from', { recipe: OTHER }, 'after'],
  ])('refuses %s, names the field and writes nothing', async (_, body, field) => {
    expect(await send(body)).toMatchObject({ status: 422, body: { invalid_params: [{ name: field }] } })
    expect(await recipes()).toEqual([{ version: 1 }])
  })

  it.each([
    ['somebody signed out', 401, () => null],
    ['a grader', 403, () => scenario.graders[0]],
    ['a viewer', 403, () => scenario.reader],
    ['somebody outside the campaign', 404, () => scenario.stranger],
  ])('is closed to %s', async (_, status, who) => {
    viewer = who()
    expect(await send()).toMatchObject({ status })
    expect(await send({ after: 1, recipe: OTHER })).toMatchObject({ status })
    expect(await recipes()).toEqual([{ version: 1 }])
  })

  it('refuses a change that another site makes with the cookie of a lead', async () => {
    expect(await send({ after: 1, recipe: OTHER }, { 'sec-fetch-site': 'cross-site' })).toMatchObject({ status: 403 })
    expect(await recipes()).toEqual([{ version: 1 }])
  })
})
