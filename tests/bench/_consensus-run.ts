/**
 * Consensus through a database on disk in a process of its own, so that its memory and its blocks of the event loop can be read:
 * a campaign by the reliability method with 100,000 candidates and 500,000 grades of 20 graders, a run over all of them, one grade
 * after the other, what comes next, and thresholds that are moved. Prints one line of JSON. Argument: candidates.
 */
import { mkdtemp, rm } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { monitorEventLoopDelay } from 'node:perf_hooks'
import { promisify } from 'node:util'
import { gzip } from 'node:zlib'
import { sql, type Kysely } from 'kysely'
import { openDatabase } from '@/db/connection'
import { migrateToLatest } from '@/db/migrator'
import { insertPerson, upsertMembership } from '@/db/queries/people'
import type { DB } from '@/db/schema'
import { scoreBins } from '@/components/what-if/score-bins'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'
import { CampaignInput } from '@/lib/work/campaigns/campaign-input'
import { createCampaign } from '@/lib/work/campaigns/create-campaign'
import { RuleInput } from '@/lib/work/campaigns/rule-input'
import { qualityCurve } from '@/lib/work/consensus/quality-curve'
import { runConsensus } from '@/lib/work/consensus/run-consensus'
import { tryRule } from '@/lib/work/consensus/try-rule'
import { readWhatIf } from '@/lib/work/consensus/what-if'
import { encodeWhatIf, withProbabilities } from '@/lib/work/consensus/what-if-columns'
import { GradeInput } from '@/lib/work/grading/grade-input'
import { recordGrade } from '@/lib/work/grading/record-grade'
import { permitCampaign, type CampaignPermit } from '@/lib/work/people/permission'
import { lendNext } from '@/lib/work/queue/lend-next'

const GRADERS = 20
const GRADES_A_CANDIDATE = 5
const ROWS_A_STATEMENT = 5000
const NOW = '2026-01-01T00:00:00.000Z'

export interface TimedSpan {
  seconds: number
  /** longest time in which the process did nothing else */
  longestBlockMs: number
}

/** Milliseconds of each call, sorted: until it had answered, and of the processor, which other programs do not lengthen. */
export interface Calls {
  wall: number[]
  processor: number[]
}

export interface ConsensusRun {
  candidates: number
  grades: number
  first: TimedSpan
  again: TimedSpan
  grade: Calls
  lend: Calls
  readWhatIf: TimedSpan & { megabytes: number }
  move: Calls
  peakMegabytes: number
}

async function timed<T>(work: () => Promise<T>): Promise<TimedSpan & { result: T }> {
  const delay = monitorEventLoopDelay({ resolution: 1 })
  delay.enable()
  const started = performance.now()
  const result = await work()
  const seconds = (performance.now() - started) / 1000
  // The last block counts only once the loop has turned.
  await new Promise((resolve) => setTimeout(resolve, 5))
  delay.disable()
  return { seconds, longestBlockMs: delay.max / 1e6, result }
}

async function timeEach<T>(items: readonly T[], work: (item: T) => unknown): Promise<Calls> {
  const calls: Calls = { wall: [], processor: [] }
  for (const item of items) {
    const before = process.cpuUsage()
    const started = performance.now()
    await work(item)
    calls.wall.push(performance.now() - started)
    const { user, system } = process.cpuUsage(before)
    calls.processor.push((user + system) / 1000)
  }
  for (const times of [calls.wall, calls.processor]) times.sort((a, b) => a - b)
  return calls
}

interface Site {
  lead: CampaignPermit<'lead'>
  graders: CampaignPermit<'grade'>[]
}

async function makeSite(db: Kysely<DB>): Promise<Site> {
  const person = async (name: string, isAdmin = false) => {
    const email = `${name}@saltmarsh.test`
    return { id: await insertPerson(db, { email, name, passwordHash: null, isAdmin, now: NOW }), name, email, isAdmin }
  }
  const leader = await person('avocet', true)
  const input = CampaignInput.parse({ name: 'Large', survey: 'Saltmarsh Wide Survey', acronym: 'SWS', bands: 'g r i' })
  const campaign = await createCampaign(db, leader, input, RuleInput.parse({ method: 'reliability' }))
  const graders: CampaignPermit<'grade'>[] = []
  for (let grader = 0; grader < GRADERS; grader++) {
    const one = await person(`grader${grader}`)
    const pseudonym = `G${String(grader + 2).padStart(2, '0')}`
    await upsertMembership(db, { campaignId: campaign.id, personId: one.id, role: 'grader', pseudonym, now: NOW })
    graders.push(await permitCampaign(db, one, campaign.slug, 'grade'))
  }
  return { lead: await permitCampaign(db, leader, campaign.slug, 'lead'), graders }
}

/** One in 50 is a lens; graders of rising skill. The rows are those that the use cases write, many at a time. */
async function fill(db: Kysely<DB>, { lead, graders }: Site, candidates: number): Promise<void> {
  const random = new SeededRandom(20261207)
  const campaignId = lead.campaign.id
  for (let from = 1; from <= candidates; from += ROWS_A_STATEMENT) {
    const to = Math.min(candidates, from + ROWS_A_STATEMENT - 1)
    await sql`
      with recursive number (n) as (select ${from} union all select n + 1 from number where n < ${to})
      insert into candidate (id, campaign_id, name, ra_deg, dec_deg, imaged_at, state_since, created_at, grades_given)
      select n, ${campaignId}, printf('SWS%06d', n), 150 + n / 1e5, 2, ${NOW}, ${NOW}, ${NOW}, ${GRADES_A_CANDIDATE}
      from number`.execute(db)
    const grades: [candidate: number, person: number, grade: string][] = []
    for (let candidate = from; candidate <= to; candidate++) {
      const lens = random.chance(0.02)
      const first = random.integer(0, GRADERS - 1)
      for (let look = 0; look < GRADES_A_CANDIDATE; look++) {
        const grader = (first + look * 3) % GRADERS
        const right = random.chance(0.6 + 0.015 * grader)
        grades.push([candidate, graders[grader].viewer.id, (lens === right ? 'AAB' : 'NNC')[random.integer(0, 2)]])
      }
    }
    await sql`
      insert into grade (uid, campaign_id, candidate_id, person_id, occasion, grade, tags, given_at)
      select printf('bench-%d-%d', g.value ->> 0, g.value ->> 1), ${campaignId}, g.value ->> 0, g.value ->> 1, 'first',
        g.value ->> 2, '[]', ${NOW}
      from json_each(${JSON.stringify(grades)}) g`.execute(db)
  }
}

async function measure(db: Kysely<DB>, candidates: number): Promise<ConsensusRun> {
  const site = await makeSite(db)
  await fill(db, site, candidates)
  const first = await timed(() => runConsensus(db, site.lead))
  const lent: { grader: number; id: number }[] = []
  const lend = await timeEach(site.graders, async (permit) => {
    const { candidates: next } = await lendNext(db, permit, 10)
    lent.push(...next.map(({ id }) => ({ grader: site.graders.indexOf(permit), id })))
  })
  const answers = ['A', 'B', 'C', 'N'].map((grade) => GradeInput.parse({ grade }))
  const grade = await timeEach(lent, ({ grader, id }) => recordGrade(db, site.graders[grader], id, answers[id % 4]))
  const again = await timed(() => runConsensus(db, site.lead))
  const read = await timed(() => readWhatIf(db, site.lead))
  const megabytes = (await promisify(gzip)(encodeWhatIf(read.result), { level: 1 })).length / 2 ** 20
  const columns = withProbabilities(read.result)
  const rules = Array.from({ length: 40 }, (_, at) =>
    at % 2
      ? RuleInput.parse({ method: 'reliability', falseConfirmed: 0.0005 * (at + 1) })
      : RuleInput.parse({ method: 'mean', confirmMean: 1.5 + 0.02 * at }),
  )
  const move = await timeEach(rules, (rule) => [
    tryRule(columns, rule),
    qualityCurve(columns, rule),
    scoreBins(columns, rule),
  ])
  const span = ({ seconds, longestBlockMs }: TimedSpan): TimedSpan => ({ seconds, longestBlockMs })
  return {
    candidates,
    grades: candidates * GRADES_A_CANDIDATE,
    first: span(first),
    again: span(again),
    grade,
    lend,
    readWhatIf: { ...span(read), megabytes },
    move,
    peakMegabytes: process.resourceUsage().maxRSS / 1024,
  }
}

const folder = await mkdtemp(join(tmpdir(), 'ringside-bench-'))
const db = openDatabase(join(folder, 'ringside.sqlite'))
try {
  await migrateToLatest(db)
  console.log(JSON.stringify(await measure(db, Number(process.argv[2]))))
} finally {
  await db.destroy()
  await rm(folder, { recursive: true })
}
