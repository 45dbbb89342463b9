import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import type { Viewer } from '@/lib/work/people/viewer'
import {
  addGraded,
  makeReleaseScenario,
  publishAndMake,
  RELEASE,
  type ReleaseScenario,
} from '@/lib/work/releases/_release-scenario'
import { releaseList } from '@/lib/work/releases/list-releases'
import { accessAction, giveUpAction, makeAgainAction, publishAction } from './actions'

let scenario: ReleaseScenario
let viewer: Viewer | null

vi.mock('@/lib/platform/database', () => ({ database: async () => scenario.db }))
vi.mock('@/lib/work/people/session', () => ({ getViewer: async () => viewer }))
vi.mock('next/cache', () => ({ revalidatePath: () => {} }))

beforeEach(async () => {
  scenario = await makeReleaseScenario({ gradesWanted: 4, leastGrades: 3 })
  await addGraded(scenario, 'lens', 'AAAB')
})
afterEach(() => scenario.end())

const formOf = (values: Record<string, string>) => {
  const form = new FormData()
  for (const [name, value] of Object.entries(values)) form.set(name, value)
  return form
}
const published = { ...(RELEASE as Record<string, string>), year: '2026', cautionsRead: 'on' }
const publish = (more: Record<string, string> = {}) =>
  publishAction(scenario.campaign.slug, {}, formOf({ ...published, ...more }))
const released = async () => releaseList(scenario.db, await scenario.permit(scenario.lead, 'read'))

const OTHERS = [
  ['a grader', () => scenario.graders[0]],
  ['a viewer', () => scenario.reader],
  ['the lead of another campaign', () => scenario.stranger],
  ['somebody signed out', () => null],
] as const

describe('publishAction', () => {
  it('publishes what a lead has filled in and goes to the list', async () => {
    viewer = scenario.lead
    await expect(publish()).rejects.toMatchObject({ digest: expect.stringContaining('/releases') })
    expect(await released()).toMatchObject([{ number: 1, title: RELEASE.title }])
  })

  it('keeps what was typed when something is missing, and names the field', async () => {
    viewer = scenario.lead
    const { errors, values } = await publish({ description: '' })
    expect(errors).toEqual({ description: expect.any(String) })
    expect(values).toMatchObject({ authors: RELEASE.authors })
    expect(await released()).toEqual([])
  })

  it.each(OTHERS)('refuses %s in words and publishes nothing', async (_, who) => {
    viewer = who()
    expect((await publish()).message).toEqual(expect.any(String))
    expect(await released()).toEqual([])
  })
})

describe('accessAction and makeAgainAction', () => {
  it('tells the address of a link once', async () => {
    await publishAndMake(scenario)
    viewer = scenario.lead
    const { values } = await accessAction(scenario.campaign.slug, 1, {}, formOf({ access: 'link' }))
    expect(values?.link).toMatch(/\/r\/north-field\/1\?key=[\w-]{43}$/)
  })

  it.each(OTHERS)('refuse %s in words and change nothing', async (_, who) => {
    await publishAndMake(scenario)
    viewer = who()
    const { slug } = scenario.campaign
    expect((await accessAction(slug, 1, {}, formOf({ access: 'link' }))).message).toEqual(expect.any(String))
    expect((await makeAgainAction(slug, 1, {})).message).toEqual(expect.any(String))
    expect((await released())[0]).toMatchObject({ access: 'private' })
  })
})

describe('giveUpAction', () => {
  const giveUp = (reason = 'Its pictures are lost.') => giveUpAction(scenario.campaign.slug, 1, {}, formOf({ reason }))

  it('leaves a release behind with the reason of a lead, and asks for one', async () => {
    viewer = scenario.lead
    await publish().catch(() => {})
    expect((await giveUp(' ')).errors).toEqual({ reason: expect.stringContaining('Say why') })
    expect(await giveUp()).toEqual({ done: 'Release 1 is given up.' })
    expect(await released()).toMatchObject([{ number: 1, givenUp: 'Its pictures are lost.', making: null }])
  })

  it.each(OTHERS)('refuses %s in words and leaves it', async (_, who) => {
    viewer = scenario.lead
    await publish().catch(() => {})
    viewer = who()
    expect((await giveUp()).message).toEqual(expect.any(String))
    expect(await released()).toMatchObject([{ number: 1, givenUp: null }])
  })
})
