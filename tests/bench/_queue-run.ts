/**
 * The queue through a database on disk with `synchronous=FULL`, in a process of its own: a campaign of a million candidates and fifty
 * graders. The first of them has graded the first 50,000 candidates in the order of the queue, the others 100,000 looks behind
 * these. Then all fifty sit at their benches for a while, and after that all ask in the same instant. Prints one line of JSON.
 * Arguments: candidates, method.
 */
import { mkdtemp, rm } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { setTimeout as pause } from 'node:timers/promises'
import { sql, type Kysely } from 'kysely'
import { openDatabase } from '@/db/connection'
import { migrateToLatest } from '@/db/migrator'
import { insertRun } from '@/db/queries/consensus'
import { requireRule } from '@/db/queries/campaigns'
import { insertPerson, upsertMembership } from '@/db/queries/people'
import type { DB } from '@/db/schema'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'
import { CampaignInput } from '@/lib/work/campaigns/campaign-input'
import { createCampaign } from '@/lib/work/campaigns/create-campaign'
import { RuleInput } from '@/lib/work/campaigns/rule-input'
import { GradeInput } from '@/lib/work/grading/grade-input'
import { recordGrade } from '@/lib/work/grading/record-grade'
import { permitCampaign } from '@/lib/work/people/permission'
import type { Viewer } from '@/lib/work/people/viewer'
import { lendNext } from '@/lib/work/queue/lend-next'
import { plansOf } from './_query-plans'

const GRADERS = 50
const STAMPS = 400
const NOW = '2026-01-01T00:00:00.000Z'
/** Seconds at a candidate, and grades of each person, while all sit at their benches. */
const SECONDS_A_LOOK = 1.5
const LOOKS = 20

export type QueueMode = 'most needed' | 'score' | 'shuffled' | 'reliability'

export interface QueueRun {
  candidates: number
  fillSeconds: number
  /** The first asking of each person after the start, ms. */
  firstAsked: number[]
  /** From asking until answered while fifty work, ms, sorted; that of the deep grader apart. */
  next: number[]
  nextOfDeepGrader: number[]
  grade: number[]
  /** Fifty in one instant, ms: of the processor for each, and until the last was answered. */
  burst: { processor: number; all: number }
  refused: number
  aboveWanted: number
  plans: string[]
}

async function makeSite(
  db: Kysely<DB>,
  mode: QueueMode,
): Promise<{ slug: string; campaignId: number; people: Viewer[] }> {
  const person = async (name: string, isAdmin = false): Promise<Viewer> => {
    const email = `${name}@saltmarsh.test`
    return { id: await insertPerson(db, { email, name, passwordHash: null, isAdmin, now: NOW }), name, email, isAdmin }
  }
  const lead = await person('avocet', true)
  const input = CampaignInput.parse({ name: 'Large', survey: 'Saltmarsh Wide Survey', acronym: 'SWS', bands: 'g r i' })
  const byReliability = mode === 'reliability'
  const rule = RuleInput.parse(byReliability ? { method: 'reliability' } : { gradesWanted: 3, leastGrades: 2 })
  const campaign = await createCampaign(db, lead, input, rule)
  await db
    .updateTable('campaign')
    .set({ queue_order: byReliability ? 'most needed' : mode, calibration_share: 0.1 })
    .execute()
  const people: Viewer[] = []
  for (let n = 0; n < GRADERS; n++) {
    people.push(await person(`grader${n}`))
    const pseudonym = `G${String(n + 2).padStart(2, '0')}`
    await upsertMembership(db, { campaignId: campaign.id, personId: people[n].id, role: 'grader', pseudonym, now: NOW })
  }
  return { slug: campaign.slug, campaignId: campaign.id, people }
}

async function fill(db: Kysely<DB>, campaignId: number, people: readonly Viewer[], candidates: number): Promise<void> {
  await sql`
    with recursive number (n) as (select 1 union all select n + 1 from number where n < ${candidates})
    insert into candidate (id, campaign_id, name, ra_deg, dec_deg, score, imaged_at, state_since, created_at, look_value,
      spread)
    select n, ${campaignId}, printf('SWS%07d', n), 150 + n / 1e5, 2, 1 - n / 1e7, ${NOW}, ${NOW}, ${NOW}, 0.2, random() & 4294967295
    from number`.execute(db)
  await sql`update candidate set truth = 'lens' where id > ${candidates - STAMPS}`.execute(db)
  const deep = Math.round(candidates / 20)
  const insert = (from: number, to: number, person: number) => sql`
    insert into grade (uid, campaign_id, candidate_id, person_id, occasion, grade, tags, given_at)
    select printf('bench-%d-%d', id, ${person}), ${campaignId}, id, ${person}, 'first', 'C', '[]', ${NOW}
    from candidate where id >= ${from} and id < ${to}`
  await insert(1, deep + 1, people[0].id).execute(db)
  const share = Math.round((2 * deep) / (GRADERS - 1))
  for (const [n, { id }] of people.slice(1).entries()) {
    // Each block twice, by two people.
    const from = deep + 1 + Math.floor(n / 2) * share
    await insert(from, from + share, id).execute(db)
  }
  await sql`update candidate set look_value = 0.3, grades_given =
    (select count(*) from grade where grade.candidate_id = candidate.id) where id <= ${4 * deep}`.execute(db)
}

const RATES = { lens: [0.5, 0.3, 0.15, 0.05], notLens: [0.02, 0.08, 0.3, 0.6] }

async function addModel(db: Kysely<DB>, campaignId: number, people: readonly Viewer[]): Promise<void> {
  const graders = people.map(({ id }) => ({ personId: id, grades: 100, calibrationGrades: 10, ...RATES }))
  const rule = await requireRule(db, campaignId)
  const summary = { candidates: 0, grades: 0, cannotJudge: 0, graders: 0, open: 0, split: 0, confirmed: 0, setAside: 0 }
  const agreement = { changed: 0, alphaOrdinal: null, alphaNote: null, fleissKappa: null, kappaNote: null }
  await insertRun(db, {
    campaignId,
    ruleId: rule.id,
    inputDigest: 'bench',
    newestGradeId: 0,
    newestCandidateId: 0,
    summary: { ...summary, ...agreement },
    model: { lensShare: 0.02, iterations: 1, converged: true, logLikelihood: 0, graders, newcomer: RATES, leftOut: [] },
    startedBy: null,
    now: NOW,
  })
}

async function measure(db: Kysely<DB>, candidates: number, mode: QueueMode): Promise<QueueRun> {
  const { slug, campaignId, people } = await makeSite(db, mode)
  const filling = performance.now()
  await fill(db, campaignId, people, candidates)
  if (mode === 'reliability') await addModel(db, campaignId, people)
  const fillSeconds = (performance.now() - filling) / 1000
  const ask = async (person: Viewer) => lendNext(db, await permitCampaign(db, person, slug, 'grade'), 5)
  const timed = async <T>(times: number[], work: () => Promise<T>): Promise<T> => {
    const started = performance.now()
    const result = await work()
    times.push(performance.now() - started)
    return result
  }
  const firstAsked: number[] = []
  for (const person of people) await timed(firstAsked, () => ask(person))
  const [next, nextOfDeepGrader, grade]: number[][] = [[], [], []]
  let refused = 0
  const sit = async (person: Viewer, at: number) => {
    const random = new SeededRandom(at + 1)
    await pause(random.uniform() * SECONDS_A_LOOK * 1000)
    for (let look = 0; look < LOOKS; look++) {
      const { candidates: lent } = await timed(at === 0 ? nextOfDeepGrader : next, () => ask(person))
      await pause((0.5 + random.uniform()) * SECONDS_A_LOOK * 1000)
      const answer = GradeInput.parse({ grade: 'ABCN'[random.integer(0, 3)] })
      await timed(grade, async () => {
        const permit = await permitCampaign(db, person, slug, 'grade')
        await recordGrade(db, permit, lent[0].id, answer).catch(() => refused++)
      })
    }
  }
  await Promise.all(people.map(sit))
  const [began, before] = [performance.now(), process.cpuUsage()]
  await Promise.all(people.map(ask))
  const all = performance.now() - began
  const { user, system } = process.cpuUsage(before)
  const above = await sql<{ n: number }>`select count(*) as n from candidate where truth is null and grades_given > (
    select max(grades_wanted) from rule)`.execute(db)
  for (const times of [next, nextOfDeepGrader, grade, firstAsked]) times.sort((a, b) => a - b)
  return {
    candidates,
    fillSeconds,
    firstAsked,
    next,
    nextOfDeepGrader,
    grade,
    burst: { processor: (user + system) / 1000 / GRADERS, all },
    refused,
    aboveWanted: above.rows[0].n,
    plans: await plansOf(db, async (watched) => {
      // So that something is lent anew and the walk itself is seen.
      await db.deleteFrom('lease').execute()
      await lendNext(watched, await permitCampaign(watched, people[1], slug, 'grade'), 5)
    }),
  }
}

const folder = await mkdtemp(join(tmpdir(), 'ringside-bench-'))
const db = openDatabase(join(folder, 'ringside.sqlite'))
try {
  await migrateToLatest(db)
  console.log(JSON.stringify(await measure(db, Number(process.argv[2]), process.argv[3] as QueueMode)))
} finally {
  await db.destroy()
  await rm(folder, { recursive: true })
}
