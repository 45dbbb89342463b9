import { rm } from 'node:fs/promises'
import { sql } from 'kysely'
import { afterEach, beforeEach, expect, it } from 'vitest'
import { findRelease, listReleaseFiles } from '@/db/queries/releases'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { addGraded, makeReleaseScenario, publishAndMake, RELEASE, type ReleaseScenario } from './_release-scenario'
import { changeAccess } from './change-access'
import { giveUpRelease } from './give-up-release'
import { makeAgain } from './make-again'
import { makeRelease } from './make-release'
import { previewRelease } from './preview-release'
import { publishRelease } from './publish-release'
import { releaseList } from './list-releases'

let scenario: ReleaseScenario
let permit: CampaignPermit<'lead'>
beforeEach(async () => {
  scenario = await makeReleaseScenario({ gradesWanted: 4, leastGrades: 3 })
  permit = await scenario.permit(scenario.lead, 'lead')
  await addGraded(scenario, 'lens', 'AAAA', { raDeg: 10 })
})
afterEach(() => scenario.end())

const reason = 'Its pictures are lost.'

/** Release 1, whose pictures are gone. */
async function unmakable(): Promise<number> {
  const { id } = await publishRelease(scenario.db, permit, RELEASE)
  const without = { ...scenario.tools, stampFolder: `${scenario.tools.stampFolder}-lost` }
  await expect(makeRelease(without, id, async () => {})).rejects.toThrow(/1 picture was missing/)
  return id
}

it('stands in the way of no other release once it is given up, and keeps its number and its reason', async () => {
  const id = await unmakable()
  await expect(publishRelease(scenario.db, permit, RELEASE)).rejects.toThrow(/give that one up/)
  await giveUpRelease(scenario.db, permit, 1, { reason })
  expect(await previewRelease(scenario.db, permit)).toMatchObject({
    number: 2,
    before: null,
    beingMade: null,
    correctable: [],
  })
  const { release } = await publishAndMake(scenario)
  expect(release).toMatchObject({ number: 2, made: 1 })
  const [, first] = await releaseList(scenario.db, permit)
  expect(first).toMatchObject({ number: 1, givenUp: reason, making: null })
  await makeRelease(scenario.tools, id, async () => {})
  expect(await listReleaseFiles(scenario.db, id)).toEqual([])
})

it('is compared with by none and corrected by none', async () => {
  await unmakable()
  await giveUpRelease(scenario.db, permit, 1, { reason })
  const erratum = { ...RELEASE, kind: 'erratum' as const, corrects: 1, statement: 'A typo.' }
  await expect(publishRelease(scenario.db, permit, erratum)).rejects.toThrow(/no release 1 here/)
})

it('withdraws nothing where it is a retraction that was given up', async () => {
  await publishAndMake(scenario)
  const retraction = { ...RELEASE, kind: 'retraction' as const, corrects: 1, statement: 'Another field.' }
  await publishRelease(scenario.db, permit, retraction)
  await giveUpRelease(scenario.db, permit, 2, { reason })
  const [, first] = await releaseList(scenario.db, permit)
  expect(first.notices).toEqual([])
  expect(await publishRelease(scenario.db, permit, retraction)).toMatchObject({ number: 3 })
})

it('is neither opened nor made again, nor given up twice', async () => {
  await unmakable()
  await giveUpRelease(scenario.db, permit, 1, { reason })
  await expect(makeAgain(scenario.db, permit, 1)).rejects.toMatchObject({ status: 409, type: 'given-up' })
  await expect(giveUpRelease(scenario.db, permit, 1, { reason })).rejects.toMatchObject({ type: 'given-up' })
  await expect(changeAccess(scenario.db, permit, 1, { access: 'link' })).rejects.toMatchObject({ status: 409 })
})

it('is refused for a release that has its files, for one that is not here, and without a reason', async () => {
  await publishAndMake(scenario)
  await expect(giveUpRelease(scenario.db, permit, 1, { reason })).rejects.toMatchObject({ type: 'made-already' })
  await expect(giveUpRelease(scenario.db, permit, 7, { reason })).rejects.toMatchObject({ status: 404 })
  await expect(giveUpRelease(scenario.db, permit, 1, { reason: ' ' })).rejects.toThrow(/Say why/)
  const past = sql`insert into release_given_up values (1, 'x', ${scenario.lead.id}, '2026')`.execute(scenario.db)
  await expect(past).rejects.toThrow('withdrawn, not given up')
})

it('takes no file, entry or candidate any more, even from a job that still runs', async () => {
  const id = await unmakable()
  await giveUpRelease(scenario.db, permit, 1, { reason })
  await rm(scenario.tools.stampFolder, { recursive: true })
  const file = sql`insert into release_file values (${id}, 'README.txt', 'text/plain', 1, ${'0'.repeat(64)})`
  await expect(file.execute(scenario.db)).rejects.toThrow('given up takes nothing more')
})

it.each([
  ['of another campaign', { campaign: 'other', number: 5, corrects: 1 }],
  ['with a later number', { campaign: 'own', number: 1, corrects: 2 }],
  ['that is a retraction', { campaign: 'own', number: 9, corrects: 2 }],
])('a release corrects none %s, even past the use case', async (_, { campaign, number, corrects }) => {
  const { release } = await publishAndMake(scenario)
  await publishAndMake(scenario, { kind: 'retraction', corrects: 1, statement: 'Another field.' })
  const of = (await findRelease(scenario.db, scenario.campaign.id, corrects))!
  const { slug: _slug, access: _access, tokenHash: _hash, made: _made, givenUpReason: _reason, ...row } = release
  const campaignId = campaign === 'own' ? scenario.campaign.id : scenario.otherCampaign.id
  const inserted = scenario.db
    .insertInto('release')
    .values({
      ...row,
      id: undefined,
      campaign_id: campaignId,
      number,
      kind: 'erratum',
      corrects_id: of.id,
      statement: 'A typo.',
    })
    .execute()
  await expect(inserted).rejects.toThrow('a release corrects an earlier one of its campaign')
})
