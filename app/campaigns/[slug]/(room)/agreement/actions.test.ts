import { beforeEach, describe, expect, it, vi } from 'vitest'
import type { Viewer } from '@/lib/work/people/viewer'
import { makeScenario, type Scenario } from '@/tests/_support/scenario'
import { leaveOutAction } from './actions'

let scenario: Scenario
let viewer: Viewer | null

vi.mock('@/lib/platform/database', () => ({ database: async () => scenario.db }))
vi.mock('@/lib/work/people/session', () => ({ getViewer: async () => viewer }))
vi.mock('next/cache', () => ({ revalidatePath: () => {} }))

beforeEach(async () => {
  scenario = await makeScenario()
})

function leave(reason = 'Keys swapped') {
  const form = new FormData()
  form.set('reason', reason)
  return leaveOutAction(scenario.campaign.slug, scenario.graders[1].id, true, {}, form)
}

const decisions = () => scenario.db.selectFrom('left_out').select(['person_id', 'left_out', 'reason']).execute()

describe('leaveOutAction', () => {
  it('leaves a grader out for a lead and goes back to the page of everybody', async () => {
    viewer = scenario.lead
    await expect(leave()).rejects.toMatchObject({ digest: expect.stringContaining('/agreement') })
    expect(await decisions()).toEqual([{ person_id: scenario.graders[1].id, left_out: 1, reason: 'Keys swapped' }])
  })

  it.each([
    ['a grader', () => scenario.graders[0]],
    ['a viewer', () => scenario.reader],
    ['somebody outside the campaign', () => scenario.stranger],
    ['somebody signed out', () => null],
  ])('refuses %s in words and decides nothing', async (_, who) => {
    viewer = who()
    expect((await leave()).message).toEqual(expect.any(String))
    expect(await decisions()).toEqual([])
  })

  it('refuses a lead who gives no reason', async () => {
    viewer = scenario.lead
    const { message, errors } = await leave(' ')
    expect(message ?? errors?.reason).toEqual(expect.any(String))
    expect(await decisions()).toEqual([])
  })
})
