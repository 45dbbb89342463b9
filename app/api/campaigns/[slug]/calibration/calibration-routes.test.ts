import { NextRequest } from 'next/server'
import { afterEach, beforeEach, expect, it, vi } from 'vitest'
import { USUAL_RANGES } from '@/lib/science/lensing/painting/painting-ranges'
import { practiceHalf } from '@/lib/work/calibration/practice-half'
import type { Viewer } from '@/lib/work/people/viewer'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'

let scenario: Scenario
let viewer: Viewer | null
vi.mock('@/lib/platform/database', () => ({ database: async () => scenario.db }))
vi.mock('@/lib/work/people/session', () => ({ getViewer: async () => viewer }))

const { GET, POST } = await import('./route')
const { GET: galaxies } = await import('./galaxies/route')
const { GET: practice } = await import('../practice/route')
const { PUT: answer } = await import('../practice/[id]/route')

let id: number
beforeEach(async () => {
  scenario = await makeScenario()
  id = await addImagedCandidate(scenario.db, scenario.campaign, 'SWS0001')
})
afterEach(() => scenario.db.destroy())

const root = () => `http://localhost/api/campaigns/${scenario.campaign.slug}`
const context = (more = {}) => ({ params: Promise.resolve({ slug: scenario.campaign.slug, ...more }) })
const order = () => ({ ranges: USUAL_RANGES, galaxies: [id], lenses: 1, others: 0, seed: 1 })
const send = (body: unknown) =>
  POST(new NextRequest(`${root()}/calibration`, { method: 'POST', body: JSON.stringify(body) }), context())

it('a lead orders stamps and sees them; everybody else is refused, and nothing is queued for them', async () => {
  for (const [who, status] of [
    [null, 401],
    [scenario.stranger, 404],
    [scenario.reader, 403],
    [scenario.graders[0], 403],
  ] as const) {
    viewer = who
    expect((await send(order())).status).toBe(status)
    expect((await GET(new NextRequest(`${root()}/calibration`), context())).status).toBe(status)
    expect((await galaxies(new NextRequest(`${root()}/calibration/galaxies`), context())).status).toBe(status)
  }
  expect(await scenario.db.selectFrom('job').select('kind').execute()).toEqual([])
  viewer = scenario.lead
  expect((await send(order())).status).toBe(202)
  expect(await (await GET(new NextRequest(`${root()}/calibration`), context())).json()).toMatchObject({
    work: { done: 0 },
  })
})

it('an order that cannot be is refused with the field and the sentence', async () => {
  viewer = scenario.lead
  const response = await send({ ...order(), lenses: 3 })
  expect(response.status).toBe(422)
  expect(JSON.stringify(await response.json())).toContain('3 stamps take as many galaxies, and 1 are chosen')
})

/** Chooses the site's secret so that the first grader has the stamp to practise on. */
async function keepForPractice(stamp: number): Promise<void> {
  const who = { campaignId: scenario.campaign.id, personId: scenario.graders[0].id }
  for (let n = 0; ; n++) {
    await scenario.db
      .replaceInto('site')
      .values({ key: 'queue-secret', value: `secret ${n}` })
      .execute()
    if ((await practiceHalf(scenario.db, who)).has(stamp)) return
  }
}

it('practice is for graders: its stamp has no truth on the wire, and viewers and strangers get none', async () => {
  await scenario.db.updateTable('candidate').set({ truth: 'lens', explanation: 'Painted.' }).execute()
  await keepForPractice(id)
  const ask = () => practice(new NextRequest(`${root()}/practice`), context())
  const give = () =>
    answer(
      new NextRequest(`${root()}/practice/${id}`, {
        method: 'PUT',
        body: JSON.stringify({ grade: 'A', id: 'practice-1', seconds: 2 }),
      }),
      context({ id: String(id) }),
    )
  for (const [who, status] of [
    [scenario.stranger, 404],
    [scenario.reader, 403],
  ] as const) {
    viewer = who
    expect((await ask()).status).toBe(status)
    expect((await give()).status).toBe(status)
  }
  viewer = scenario.graders[0]
  const text = await (await ask()).text()
  expect(JSON.parse(text).next.id).toBe(id)
  expect(text).not.toMatch(/truth|Painted|painting/)
  expect(await (await give()).json()).toMatchObject({ truth: 'lens', explanation: 'Painted.' })
})
