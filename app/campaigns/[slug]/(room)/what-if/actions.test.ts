import { beforeEach, describe, expect, it, vi } from 'vitest'
import type { Viewer } from '@/lib/work/people/viewer'
import { makeScenario, type Scenario } from '@/tests/_support/scenario'
import { makeRuleAction } from './actions'

let scenario: Scenario
let viewer: Viewer | null

vi.mock('@/lib/platform/database', () => ({ database: async () => scenario.db }))
vi.mock('@/lib/work/people/session', () => ({ getViewer: async () => viewer }))
vi.mock('next/cache', () => ({ revalidatePath: () => {} }))

beforeEach(async () => {
  scenario = await makeScenario()
})

function make(triedAgainst = '1') {
  const form = new FormData()
  form.set('triedAgainst', triedAgainst)
  for (const [name, value] of Object.entries({ method: 'mean', gradesWanted: '5', leastGrades: '3' })) {
    form.set(name, value)
  }
  return makeRuleAction(scenario.campaign.slug, {}, form)
}

const versions = () => scenario.db.selectFrom('rule').select('version').where('version', '>', 1).execute()

describe('makeRuleAction', () => {
  it('makes the rule that a lead tried the next version', async () => {
    viewer = scenario.lead
    expect((await make()).done).toMatch(/^Version 2 is in force/)
    expect(await versions()).toEqual([{ version: 2 }])
  })

  it.each([
    ['a grader', () => scenario.graders[0]],
    ['a viewer', () => scenario.reader],
    ['somebody outside the campaign', () => scenario.stranger],
    ['somebody signed out', () => null],
  ])('refuses %s in words and makes nothing', async (_, who) => {
    viewer = who()
    const state = await make()
    expect(state.done).toBeUndefined()
    expect(state.message).toEqual(expect.any(String))
    expect(await versions()).toEqual([])
  })

  it('refuses without the version that it was tried against', async () => {
    viewer = scenario.lead
    expect((await make('soon')).done).toBeUndefined()
    expect(await versions()).toEqual([])
  })
})
