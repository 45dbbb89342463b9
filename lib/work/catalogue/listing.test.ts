import { sql, type Kysely } from 'kysely'
import { afterEach, beforeEach, expect, it } from 'vitest'
import { listJudgedAmong } from '@/db/queries/grading'
import { insertLeftOut } from '@/db/queries/left-out'
import { insertRuling } from '@/db/queries/rulings'
import { up, down } from '@/migrations/015-listing'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'
import { applyStates } from '@/lib/work/consensus/apply-state'
import { addCalibrationCandidate, addJudgedCandidate, giveGrades } from '@/tests/_support/judged-candidate'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { catalogueEntries } from './catalogue-entries'

let scenario: Scenario
beforeEach(async () => {
  scenario = await makeScenario({ gradesWanted: 4, leastGrades: 3 })
})
afterEach(() => scenario.db.destroy())

/** As migrations take it. */
const bare = () => scenario.db as unknown as Kysely<unknown>

const NOW = '2026-03-01T00:00:00.000Z'
const rowsOf = async (table: string) => (await sql<object>`select * from ${sql.table(table)}`.execute(scenario.db)).rows
const listing = async () => [...(await rowsOf('listing')), ...(await rowsOf('judged'))]

/** A history in which everything that moves a row happens, in a random order. */
async function live(seed: number): Promise<void> {
  const { db, campaign, graders, lead } = scenario
  const random = new SeededRandom(seed)
  const ids: number[] = []
  let renamed = 100
  const some = () => ids[random.integer(0, ids.length - 1)]
  const letters = () => Array.from({ length: 4 }, () => 'AABCNU '[random.integer(0, 6)]).join('')
  for (let n = 0; n < 6; n++) {
    const judged = { tags: ['ring', 'arc'].slice(random.integer(0, 2)), remark: 'a remark' }
    ids.push(await addJudgedCandidate(scenario, `SWS${n}`, { grades: n % 2 ? 'AAB ' : letters(), ...judged }))
  }
  await giveGrades(scenario, await addCalibrationCandidate(scenario, 'stamp'), { grades: letters() })
  await addImagedCandidate(db, campaign, 'fresh')
  const steps = [
    async () => {
      const [person, id] = [graders[random.integer(0, 3)], some()]
      const old = await db
        .selectFrom('grade')
        .selectAll()
        .where('candidate_id', '=', id)
        .where('person_id', '=', person.id)
        .orderBy('id', 'desc')
        .executeTakeFirst()
      const { id: replaces = null, ...values } = old ?? {}
      const grade = 'ABCNU'[random.integer(0, 4)] as 'A'
      if (old)
        await db
          .insertInto('grade')
          .values({ ...(values as typeof old), id: undefined, uid: `c-${replaces}`, grade, replaces })
          .execute()
    },
    async () => {
      const outcome = (['confirmed', 'set aside', 'by verdict'] as const)[random.integer(0, 2)]
      const id = some()
      const grade = outcome === 'confirmed' ? (['A', 'C', null] as const)[random.integer(0, 2)] : null
      await db.transaction().execute(async (transaction) => {
        const ruling = await insertRuling(transaction, {
          ...{ candidateId: id, personId: lead.id, outcome, grade, reason: 'seen', looksAsked: 0, now: NOW },
        })
        const state = outcome === 'by verdict' ? 'split' : outcome
        await applyStates(
          transaction,
          campaign,
          [{ candidateId: id, state, restsOn: { cause: 'ruling', id: ruling } }],
          NOW,
        )
      })
    },
    async () => {
      const [id, person] = [some(), graders[random.integer(0, 3)].id]
      const open = { grade_id: null, withdrawn_at: null }
      await db
        .updateTable('asked_look')
        .set({ withdrawn_at: NOW })
        .where('candidate_id', '=', id)
        .where('person_id', '=', person)
        .where('withdrawn_at', 'is', null)
        .execute()
      if (random.chance(0.3)) return
      const ask = {
        campaign_id: campaign.id,
        candidate_id: id,
        person_id: person,
        asked_by: lead.id,
        note: null,
        asked_at: NOW,
      }
      await db
        .insertInto('asked_look')
        .values({ ...ask, ...open })
        .execute()
    },
    async () =>
      insertLeftOut(db, {
        ...{ campaignId: campaign.id, personId: graders[random.integer(0, 3)].id, leftOut: random.chance(0.6) },
        ...{ reason: 'asleep', decidedBy: lead.id, now: NOW },
      }),
    async () =>
      db
        .updateTable('candidate')
        .set({ score: random.integer(0, 9), ra_deg: 12 })
        .where('id', '=', some())
        .execute(),
    async () =>
      db
        .updateTable('candidate')
        .set({ name: `SWS${(renamed += 1)}a` })
        .where('id', '=', some())
        .execute(),
  ]
  for (let n = 0; n < 40; n++) await steps[random.integer(0, steps.length - 1)]()
}

it.each([1, 2, 3])('is after any history as it would be made anew (seed %d)', async (seed) => {
  await live(seed)
  const kept = await listing()
  await down(bare())
  await up(bare())
  expect(await listing()).toEqual(kept)
})

it.each([4, 6, 8])('has of each entry what the catalogue says of it (seed %d)', async (seed) => {
  await live(seed)
  const said = []
  for await (const page of catalogueEntries(scenario.db, await scenario.permit(scenario.lead, 'read')))
    said.push(...page)
  expect(said.length).toBeGreaterThan(0)
  const rows = await scenario.db
    .selectFrom('listing')
    .selectAll()
    .where('entered_at', 'is not', null)
    .orderBy('candidate_id')
    .execute()
  expect(
    rows.map((row) => ({
      id: row.candidate_id,
      designation: row.designation,
      gradeClass: row.grade_class,
      mean: row.entry_mean,
      spread: row.entry_spread,
      grades: row.entry_grades,
      cannot: row.entry_cannot_judge,
      tags: row.entry_tags ?? '',
      enteredAt: row.entered_at,
    })),
  ).toEqual(
    said.map(({ id, designation, gradeClass, mean, spread, votes, tags, enteredAt }) => ({
      id,
      designation,
      gradeClass,
      mean,
      spread,
      grades: votes.A + votes.B + votes.C + votes.N,
      cannot: votes.U,
      tags: tags
        .map(({ tag }) => tag)
        .toSorted()
        .join(', '),
      enteredAt,
    })),
  )
})

it.each([9, 10])('knows of each grader what their own judgement opens to them (seed %d)', async (seed) => {
  await live(seed)
  const { db, campaign, graders } = scenario
  const all = await db.selectFrom('candidate').select('id').execute()
  for (const { id } of graders) {
    const kept = await db.selectFrom('judged').select('candidate_id as at').where('person_id', '=', id).execute()
    const ids = all.map((candidate) => candidate.id)
    const judged = await listJudgedAmong(db, campaign.id, id, ids)
    expect(judged.length).toBeGreaterThan(0)
    expect(kept.map(({ at }) => at).toSorted()).toEqual(judged.toSorted())
  }
})

it('is made once by two migrations in a row, and taken back once', async () => {
  await live(7)
  const kept = await listing()
  await up(bare())
  expect(await listing()).toEqual(kept)
  await down(bare())
  await down(bare())
  await up(bare())
  expect(await listing()).toEqual(kept)
})

it('loses a candidate with the candidate', async () => {
  const id = await addImagedCandidate(scenario.db, scenario.campaign, 'gone')
  await scenario.db.deleteFrom('candidate').where('id', '=', id).execute()
  expect(await listing()).toEqual([])
})
