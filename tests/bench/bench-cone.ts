/**
 * Matching in SQLite: one candidate against a list of a million objects, with the plan of its query, and a page's labels at 100,000
 * candidates. Two skies: objects all over it, and all in a strip of 100 by 2 degrees, where a band of declination holds many.
 */
import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import path from 'node:path'
import { sql, type CompiledQuery, type Kysely } from 'kysely'
import { openDatabase } from '@/db/connection'
import { migrateToLatest } from '@/db/migrator'
import { deleteMatchesOf, insertObjectMatches, keptOutOfNew, listObjectMatches } from '@/db/queries/matching'
import { insertObjects } from '@/db/queries/reference-lists'
import type { DB } from '@/db/schema'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'
import { matchDue, matchList } from '@/lib/work/matching/match-candidates'
import { againstAim } from '@/tests/bench/_aim'
import { duration } from '@/tests/bench/_peer'

const CANDIDATES = 100_000
const NOW = '2026-01-01T00:00:00.000Z'

type Sky = 'all sky' | 'a strip'

export async function benchCone(objects = 1_000_000): Promise<string[]> {
  const lines: string[] = []
  for (const sky of ['all sky', 'a strip'] as const) lines.push(...(await onSky(sky, objects)))
  return lines
}

async function onSky(sky: Sky, objects: number): Promise<string[]> {
  const folder = mkdtempSync(path.join(tmpdir(), 'ringside-cone-'))
  const db = openDatabase(path.join(folder, 'ringside.sqlite'))
  try {
    await migrateToLatest(db)
    const random = new SeededRandom(20261201)
    const list = await fill(db, sky, objects, random)
    const told = `${objects.toLocaleString('en')} objects over ${sky}`
    const started = performance.now()
    await matchList(db, { id: list, campaignId: 1 }, async () => {})
    const whole = performance.now() - started
    const one = await times(db, 2000, random, async (id) => {
      await deleteMatchesOf(db, [id])
      await insertObjectMatches(db, [id])
    })
    await sql`insert into match_due select campaign_id, id from candidate where id <= 5000`.execute(db)
    const dueStarted = performance.now()
    await matchDue(db, 1, async () => {})
    const due = performance.now() - dueStarted
    const labels = await times(db, 200, random, (id) =>
      listObjectMatches(
        db,
        Array.from({ length: 500 }, (_, k) => ((id + k) % CANDIDATES) + 1),
      ),
    )
    const newStarted = performance.now()
    const { count } = await db
      .selectFrom('candidate')
      .select((e) => e.fn.countAll<number>().as('count'))
      .where((e) => e.not(keptOutOfNew(1)))
      .executeTakeFirstOrThrow()
    const counting = performance.now() - newStarted
    return [
      `cone: one candidate against ${told}: median ${one.median.toFixed(3)} ms, p99 ${one.p99.toFixed(3)} ms, of processor time ${one.p99Processor.toFixed(3)} ms (${againstAim(one.p99Processor, 2, 'ms')})`,
      `cone: ${CANDIDATES.toLocaleString('en')} candidates against that list, in turns: ${duration(whole)}`,
      `cone: 5,000 moved candidates against list and own campaign: ${duration(due)}`,
      `cone: labels of 500 of ${CANDIDATES.toLocaleString('en')} candidates: median ${labels.median.toFixed(2)} ms, p99 ${labels.p99.toFixed(2)} ms`,
      `cone: ${count.toLocaleString('en')} of them are new, counted in ${duration(counting)}`,
      ...(await plan(db)),
    ]
  } finally {
    await db.destroy()
    rmSync(folder, { recursive: true, force: true })
  }
}

/** One campaign and one list; every tenth candidate lies within half an arcsecond of an object. */
async function fill(db: Kysely<DB>, sky: Sky, objects: number, random: SeededRandom): Promise<number> {
  await sql`insert into person (id, name, created_at) values (1, 'avocet', ${NOW})`.execute(db)
  await sql`insert into campaign (id, slug, name, survey, acronym, bands, created_by, created_at)
    values (1, 'bench', 'Bench', 'Saltmarsh Wide Survey', 'SWS', '["g"]', 1, ${NOW})`.execute(db)
  await sql`insert into reference_list (id, campaign_id, name, source, list_date, file_name, format, sha256, bytes, mapping,
    rows, positions, radius_arcsec, state, uploaded_by, uploaded_at, state_since) values (1, 1, 'List', 'Made', '2026', 'a.csv',
    'csv', ${'0'.repeat(64)}, 0, '{}', ${objects}, ${objects}, 2, 'ready', 1, ${NOW}, ${NOW})`.execute(db)
  const place = (): [number, number] =>
    sky === 'all sky'
      ? [random.uniform() * 360, (Math.asin(2 * random.uniform() - 1) * 180) / Math.PI]
      : [150 + random.uniform() * 100, random.uniform() * 2]
  const kept: [number, number][] = []
  for (let start = 0; start < objects; start += 10_000) {
    const part: unknown[] = []
    for (let row = start + 1; row <= Math.min(start + 10_000, objects); row++) {
      const [raDeg, decDeg] = place()
      if (kept.length < CANDIDATES) kept.push([raDeg, decDeg])
      part.push([row, `K${row}`, raDeg, decDeg, null, null])
    }
    await insertObjects(db, 1, JSON.stringify(part))
  }
  for (let start = 0; start < CANDIDATES; start += 5000) {
    const part = Array.from({ length: 5000 }, (_, k) => {
      const near = k % 10 === 0 ? kept[(start + k) % kept.length] : null
      return near ? [near[0], Math.min(90, near[1] + 0.4 / 3600)] : place()
    })
    await sql`insert into candidate (campaign_id, name, ra_deg, dec_deg, state_since, created_at)
      select 1, 'C' || (${start} + key), value ->> 0, value ->> 1, ${NOW}, ${NOW} from json_each(${JSON.stringify(part)})`.execute(
      db,
    )
  }
  await sql`delete from match_due`.execute(db)
  return 1
}

async function times(
  db: Kysely<DB>,
  runs: number,
  random: SeededRandom,
  work: (candidateId: number) => Promise<unknown>,
): Promise<{ median: number; p99: number; p99Processor: number }> {
  const found: number[] = []
  const processor: number[] = []
  await sql`pragma synchronous = normal`.execute(db)
  for (let run = 0; run < runs; run++) {
    const id = 1 + Math.floor(random.uniform() * CANDIDATES)
    const used = process.cpuUsage()
    const started = performance.now()
    await work(id)
    found.push(performance.now() - started)
    const { user, system } = process.cpuUsage(used)
    processor.push((user + system) / 1000)
  }
  found.sort((a, b) => a - b)
  processor.sort((a, b) => a - b)
  const last = Math.floor(runs * 0.99)
  return { median: found[runs >> 1], p99: found[last], p99Processor: processor[last] }
}

/** The steps of the query that matches one candidate with lists. */
async function plan(db: Kysely<DB>): Promise<string[]> {
  const seen: CompiledQuery[] = []
  const watched = db.withPlugin({
    transformQuery: ({ node, queryId }) => {
      seen.push(db.getExecutor().compileQuery(node, queryId))
      return node
    },
    transformResult: async ({ result }) => result,
  })
  await deleteMatchesOf(db, [1])
  await insertObjectMatches(watched, [1])
  const [query] = seen
  const { rows } = await db.executeQuery<{ detail: string }>({ ...query, sql: `explain query plan ${query.sql}` })
  return rows.map(({ detail }) => `cone:   ${detail}`)
}
