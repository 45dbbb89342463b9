/**
 * The tables of a campaign with 100,000 candidates and half a million grades of 25 graders, and of one with as many confirmed
 * candidates, in a database on disk: every order at its first page, its middle and its last, and every filter, as a lead, a grader
 * and a viewer are served them, thumbnails and notes included. Prints one line of JSON. Argument: candidates.
 */
import { mkdtemp, rm } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { sql, type Kysely } from 'kysely'
import { openDatabase } from '@/db/connection'
import { migrateToLatest } from '@/db/migrator'
import { requireRule } from '@/db/queries/campaigns'
import { insertRun } from '@/db/queries/consensus'
import type { ColumnCondition } from '@/db/queries/list-conditions'
import type { ListColumnName } from '@/db/queries/list-columns'
import { insertPerson, upsertMembership } from '@/db/queries/people'
import type { DB } from '@/db/schema'
import type { Role } from '@/db/schema/people'
import { coneHalfWidthDeg } from '@/lib/science/sky/separation'
import { CampaignInput } from '@/lib/work/campaigns/campaign-input'
import { down as leaveListing, up as makeListing } from '@/migrations/015-listing'
import { createCampaign } from '@/lib/work/campaigns/create-campaign'
import { RuleInput } from '@/lib/work/campaigns/rule-input'
import { candidateTable } from '@/lib/work/catalogue/candidate-table'
import { catalogueTable } from '@/lib/work/catalogue/catalogue-table'
import type { TableInput } from '@/lib/work/catalogue/table-input'
import { permitCampaign, type CampaignPermit } from '@/lib/work/people/permission'
import type { Viewer } from '@/lib/work/people/viewer'
import { plansOf } from './_query-plans'

const GRADERS = 25
const LOOKS = 5
const REPEATS = 5
const NOW = '2026-01-01T00:00:00.000Z'
const PAGE = { page: 0, pageSize: 100 }

export interface TimedTable {
  what: string
  /** of the processor, ms, sorted */
  times: number[]
  found: number
}

export interface TablesRun {
  candidates: number
  fillSeconds: number
  tables: TimedTable[]
  slowest: { what: string; plans: string[] }
  /** Leaving out a grader, which counts their entries anew. */
  leaveOutMs: number
}

async function makeCampaign(db: Kysely<DB>, lead: Viewer, name: string, members: readonly (readonly [Viewer, Role])[]) {
  const input = CampaignInput.parse({ name, survey: 'Saltmarsh Wide Survey', acronym: 'SWS', bands: 'g r i' })
  const campaign = await createCampaign(db, lead, input, RuleInput.parse({ gradesWanted: LOOKS, leastGrades: 2 }))
  for (const [at, [{ id }, role]] of members.entries()) {
    const pseudonym = `G${String(at + 2).padStart(2, '0')}`
    await upsertMembership(db, { campaignId: campaign.id, personId: id, role, pseudonym, now: NOW })
  }
  return campaign
}

/** Rows as the use cases leave them, many at a time. One in 50 is a calibration stamp, one in 20 of the rest confirmed, or all. */
async function fill(
  db: Kysely<DB>,
  campaignId: number,
  graders: readonly Viewer[],
  size: number,
  allConfirmed: boolean,
) {
  const first =
    (
      await db
        .selectFrom('candidate')
        .select((e) => e.fn.max('id').as('id'))
        .executeTakeFirst()
    )?.id ?? 0
  const hash = (salt: number) => sql`((n * 2654435769 + ${salt * 40503}) & 4294967295) / 4294967296.0`
  await sql`
    with recursive number (n) as (select 1 union all select n + 1 from number where n < ${size})
    insert into candidate (id, campaign_id, name, ra_deg, dec_deg, score, lens_redshift, truth, imaged_at, state_since, created_at)
    select ${first} + n, ${campaignId}, printf('SWS%d', n), 360 * ${hash(1)} * 0.99999, 60 * ${hash(2)} - 30, ${hash(3)},
      case when n % 3 = 0 then ${hash(4)} end,
      case when n % 50 = 0 and ${allConfirmed ? 0 : 1} then 'lens' end, ${NOW}, ${NOW}, ${NOW}
    from number`.execute(db)
  const looks = allConfirmed ? 2 : LOOKS
  for (let look = 0; look < looks; look++) {
    await sql`
      insert into grade (uid, campaign_id, candidate_id, person_id, occasion, grade, tags, remark, given_at)
      select printf('t-%d-%d', id, ${look}), ${campaignId}, id,
        (select value from json_each(${JSON.stringify(graders.map(({ id }) => id))}) where key = (candidate.id + ${look * 5}) % ${GRADERS}),
        'first', substr(${allConfirmed ? 'AAB' : 'ABCNNN'}, 1 + (id * 7 + ${look}) % ${allConfirmed ? 3 : 6}, 1),
        iif(id % 3 = 0, '["arc","ring"]', '[]'), iif((id + ${look}) % 20 = 0, 'A faint counter-image north of it', null), ${NOW}
      from candidate where campaign_id = ${campaignId}`.execute(db)
  }
  const rule = await requireRule(db, campaignId)
  const summary = { candidates: 0, grades: 0, cannotJudge: 0, graders: 0, open: 0, split: 0, confirmed: 0, setAside: 0 }
  const agreement = { changed: 0, alphaOrdinal: null, alphaNote: null, fleissKappa: null, kappaNote: null }
  const run = await insertRun(db, {
    ...{ campaignId, ruleId: rule.id, inputDigest: 'bench', newestGradeId: 0, newestCandidateId: 0, startedBy: null },
    ...{ summary: { ...summary, ...agreement }, now: NOW },
  })
  const outcome = allConfirmed
    ? sql`'confirmed'`
    : sql`case when id % 20 = 1 then 'confirmed' when id % 10 = 2 then 'split' when id % 5 = 3 then 'open' else 'set aside' end`
  await sql`
    insert into verdict (run_id, candidate_id, outcome, grades, cannot_judge, mean, spread, probability, reason)
    select ${run.id}, id, ${outcome}, ${looks}, 0, id % 31 / 10.0, id % 16 / 10.0, id % 1009 / 1008.0, 'bench'
    from candidate where campaign_id = ${campaignId} and truth is null`.execute(db)
  await sql`
    insert into designation (candidate_id, campaign_id, designation, given_at)
    select c.id, ${campaignId}, printf('SWS J%09d', c.id), ${NOW} from candidate c join verdict v on v.candidate_id = c.id
    where c.campaign_id = ${campaignId} and v.outcome = 'confirmed'`.execute(db)
  await sql`
    update candidate set verdict_id = v.id, state = v.outcome, state_cause = 'verdict', state_cause_id = v.id,
      grades_given = ${looks}
    from verdict v where v.candidate_id = candidate.id and candidate.campaign_id = ${campaignId}`.execute(db)
}

type Ask = (input: TableInput) => Promise<{ count: number }>

async function time(what: string, work: () => Promise<{ count: number }>): Promise<TimedTable> {
  const times: number[] = []
  let found = 0
  for (let n = 0; n <= REPEATS; n++) {
    const before = process.cpuUsage()
    found = (await work()).count
    const { user, system } = process.cpuUsage(before)
    // The first has to make statements and note what is shown.
    if (n > 0) times.push((user + system) / 1000)
  }
  return { what, times: times.sort((a, b) => a - b), found }
}

const range = (least: number | string | null, most: number | string | null): ColumnCondition => ({
  kind: 'range',
  least,
  most,
})
const CONTAINS = (part: string): ColumnCondition => ({ kind: 'contains', parts: [part] })
const JUDGED_FILTERS: [ListColumnName, ColumnCondition][] = [
  ['mean', range(2, null)],
  ['spread', range(null, 0.5)],
  ['probability', range(0.9, null)],
  ['grades', range(2, null)],
  ['designation', CONTAINS('J0000')],
  ['tags', CONTAINS('ring')],
  ['remark', CONTAINS('counter')],
  ['decided', { kind: 'among', values: ['verdict'] }],
  ['entered', range('2026', null)],
]
const FILTERS: [ListColumnName, ColumnCondition][] = [
  ['name', CONTAINS('99')],
  ['name', CONTAINS('sws')],
  ['ra', { kind: 'turn', from: 350, to: 10 }],
  ['dec', range(-1, 1)],
  ...JUDGED_FILTERS,
]
const cone = (radiusArcsec: number) => {
  return { raDeg: 0.1, decDeg: 2, radiusArcsec, halfWidthDeg: coneHalfWidthDeg(2, radiusArcsec) }
}
const CANDIDATE_ORDERS: (ListColumnName | 'id')[] = [
  'id',
  'name',
  'state',
  'grades',
  'mean',
  'spread',
  'probability',
  'ra',
  'dec',
]

async function measure(
  who: string,
  ask: Ask,
  table: 'candidates' | 'catalogue',
  columns: readonly (ListColumnName | 'id')[],
) {
  const plain: TableInput = { filter: {}, order: 'name', descending: false, ...PAGE }
  const timed: { timed: TimedTable; work: () => Promise<unknown> }[] = []
  const add = async (what: string, input: Partial<TableInput>) => {
    const work = () => ask({ ...plain, ...input })
    timed.push({ timed: await time(`${table}, ${who}: ${what}`, work), work })
  }
  const { count } = await ask(plain)
  const last = Math.max(0, Math.ceil(count / PAGE.pageSize) - 1)
  for (const order of columns) {
    for (const [where, page] of [
      ['first', 0],
      ['middle', last >> 1],
      ['last', last],
    ] as const) {
      await add(`by ${order}, ${where} page`, { order, page })
      await add(`by ${order}, falling, ${where} page`, { order, page, descending: true })
    }
  }
  for (const [column, condition] of FILTERS) {
    if (table === 'catalogue' && column === 'decided') continue
    await add(`${column} ${JSON.stringify(condition)}`, { filter: { columns: [{ column, condition }] } })
  }
  if (who === 'lead' && table === 'candidates') {
    for (const [column, condition] of [
      ['score', range(0.5, null)],
      ['calibration', { kind: 'among', values: ['calibration'] }],
      ['zlens', range(0.2, 0.4)],
    ] as [ListColumnName, ColumnCondition][]) {
      await add(`${column} ${JSON.stringify(condition)}`, { filter: { columns: [{ column, condition }] } })
    }
  }
  for (const radius of [60, 3600, 36000]) await add(`within ${radius} arcsec`, { filter: { cone: cone(radius) } })
  if (table === 'candidates') {
    await add('state split', { filter: { states: ['split'] } })
    await add('state set aside', { filter: { states: ['set aside'] } })
    if (who === 'grader') await add('not graded by me', { filter: { withheld: true } })
  }
  await add('three filters, by mean', {
    order: 'mean',
    filter: {
      columns: [
        { column: 'mean', condition: range(1, null) },
        { column: 'dec', condition: range(-10, 10) },
        { column: 'tags', condition: CONTAINS('arc') },
      ],
    },
  })
  return timed
}

const folder = await mkdtemp(join(tmpdir(), 'ringside-tables-'))
try {
  const size = Number(process.argv[2])
  const db = openDatabase(join(folder, 'ringside.sqlite'))
  await migrateToLatest(db)
  const person = async (name: string, isAdmin = false): Promise<Viewer> => {
    const email = `${name}@saltmarsh.test`
    return { id: await insertPerson(db, { email, name, passwordHash: null, isAdmin, now: NOW }), name, email, isAdmin }
  }
  const lead = await person('avocet', true)
  const reader = await person('egret')
  const graders: Viewer[] = []
  for (let n = 0; n < GRADERS; n++) graders.push(await person(`grader${n}`))
  const members = [...graders.map((grader) => [grader, 'grader'] as const), [reader, 'viewer'] as const]
  const search = await makeCampaign(db, lead, 'Large', members)
  const catalogue = await makeCampaign(db, lead, 'Confirmed', members)
  const started = performance.now()
  const bare = db as unknown as Kysely<unknown>
  // What tables sort by is filled in at once at the end, which is quicker than row by row.
  await leaveListing(bare)
  await fill(db, search.id, graders, size, false)
  await fill(db, catalogue.id, graders, size, true)
  await makeListing(bare)
  const fillSeconds = (performance.now() - started) / 1000

  const people = { lead, grader: graders[0], viewer: reader }
  const tables: { timed: TimedTable; plan: () => Promise<string[]> }[] = []
  for (const [who, viewer] of Object.entries(people)) {
    for (const [table, slug] of [
      ['candidates', search.slug],
      ['catalogue', catalogue.slug],
    ] as const) {
      const permit: CampaignPermit<'read'> = await permitCampaign(db, viewer, slug, 'read')
      const serve = table === 'candidates' ? candidateTable : catalogueTable
      let latest: TableInput
      const ask = (input: TableInput) => serve(db, permit, (latest = input))
      const columns: (ListColumnName | 'id')[] =
        table === 'catalogue'
          ? [
              'name',
              'designation',
              'class',
              'mean',
              'spread',
              'grades',
              'entered',
              'decided',
              'ra',
              'dec',
              'zlens',
              'cannot',
            ]
          : [
              ...CANDIDATE_ORDERS,
              ...(who === 'grader' ? [] : ['zlens' as const]),
              'designation',
              ...(who === 'lead' ? ['score' as const] : []),
            ]
      for (const { timed, work } of await measure(who, ask, table, columns)) {
        await work()
        const input = latest!
        tables.push({ timed, plan: () => plansOf(db, (watched) => serve(watched, permit, input)) })
      }
    }
  }
  const median = ({ times }: TimedTable) => times[times.length >> 1]
  tables.sort((a, b) => median(b.timed) - median(a.timed))
  const before = performance.now()
  await db
    .insertInto('left_out')
    .values({
      campaign_id: catalogue.id,
      person_id: graders[1].id,
      left_out: 1,
      reason: 'bench',
      decided_by: lead.id,
      created_at: NOW,
    })
    .execute()
  const leaveOutMs = performance.now() - before
  const run: TablesRun = {
    candidates: size,
    fillSeconds,
    tables: tables.map(({ timed }) => timed),
    slowest: { what: tables[0].timed.what, plans: await tables[0].plan() },
    leaveOutMs,
  }
  console.log(JSON.stringify(run))
  await db.destroy()
} finally {
  await rm(folder, { recursive: true, force: true })
}
