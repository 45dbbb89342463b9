import Papa from 'papaparse'
import { afterEach, beforeEach, expect, it } from 'vitest'
import { addList } from '@/lib/work/matching/_matching-scenario'
import { matchList } from '@/lib/work/matching/match-candidates'
import { ruleOnCandidate } from '@/lib/work/rulings/rule-on-candidate'
import { giveGrades } from '@/tests/_support/judged-candidate'
import { addGraded, makeReleaseScenario, publishAndMake, readText, type ReleaseScenario } from './_release-scenario'

let scenario: ReleaseScenario
let lens: number
let none: number
beforeEach(async () => {
  scenario = await makeReleaseScenario({ gradesWanted: 4, leastGrades: 3 })
  lens = await addGraded(scenario, 'lens', 'AAA ', { raDeg: 10, decDeg: 1 })
  none = await addGraded(scenario, 'none', 'NNNN', { raDeg: 20 })
  await publishAndMake(scenario)
})
afterEach(() => scenario.end())

/** What the next release says has changed: rows as `name: change before -> after`, and the sentence of its README. */
async function changed(): Promise<{ rows: string[]; sentence: string | undefined }> {
  const { files } = await publishAndMake(scenario)
  const csv = Papa.parse<Record<string, string>>((await readText(scenario, files, 'changes.csv')).trim(), {
    header: true,
  })
  const readme = await readText(scenario, files, 'README.txt')
  return {
    rows: csv.data.map(({ name, change, before, after }) => `${name}: ${change} ${before} -> ${after}`),
    sentence: readme.match(/^.*against release.*$/im)?.[0],
  }
}

it('is nothing where the next release says the same', async () => {
  expect(await changed()).toEqual({ rows: [], sentence: 'Nothing has changed against release 1.' })
})

it('are redshifts and known objects, each with what it was', async () => {
  await scenario.db
    .updateTable('candidate')
    .set({ lens_redshift: 0.5, source_redshift: 2 })
    .where('id', 'in', [lens, none])
    .execute()
  const id = await addList(scenario, [{ name: 'Old ring', raDeg: 10, decDeg: 1 }])
  await matchList(scenario.db, { id, campaignId: scenario.campaign.id }, async () => {})
  expect(await changed()).toEqual({
    rows: [
      'lens: known objects  -> Old ring (Marsh lenses, 0.00 arcsec)',
      'lens: lens redshift  -> 0.5',
      'lens: source redshift  -> 2',
      'none: lens redshift  -> 0.5',
      'none: source redshift  -> 2',
    ],
    sentence:
      'Against release 1: 1 with other known objects; 2 with another lens redshift; 2 with another source redshift.',
  })
})

it('are votes and what follows from them, and remarks', async () => {
  await giveGrades(scenario, lens, { grades: '   B', remark: 'Only one arc.' })
  const { rows } = await changed()
  expect(rows).toEqual([
    'lens: grades A 3, B 0, C 0, N 0, 0 cannot judge -> A 3, B 1, C 0, N 0, 0 cannot judge',
    'lens: mean 3 -> 2.75',
    expect.stringMatching(/^lens: spread 0 -> 0\.43301270189/),
    'lens: remarks  -> G05: Only one arc.',
  ])
})

it('is the ruling that decides now, though the state is the same', async () => {
  const permit = await scenario.permit(scenario.lead, 'lead')
  await ruleOnCandidate(scenario.db, permit, lens, { outcome: 'confirmed', grade: 'B', reason: 'One arc only.' })
  await ruleOnCandidate(scenario.db, permit, none, { outcome: 'set aside', grade: null, reason: 'A spiral.' })
  const { rows } = await changed()
  expect(rows).toEqual([
    'lens: class A -> B',
    'lens: ruling  -> confirmed B: One arc only.',
    'none: ruling  -> set aside: A spiral.',
  ])
})

it('names what entered and left without the numbers that a candidate beside the catalogue does not have', async () => {
  const permit = await scenario.permit(scenario.lead, 'lead')
  await ruleOnCandidate(scenario.db, permit, none, { outcome: 'confirmed', grade: 'A', reason: 'A new image.' })
  const { rows } = await changed()
  expect(rows).toEqual(['none: entered set aside -> confirmed', 'none: ruling  -> confirmed A: A new image.'])
})
