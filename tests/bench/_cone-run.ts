/**
 * Cones over a release of a million entries in a database on disk: half of them spread over the sky, half in a survey of 20 square
 * degrees. Each is answered as the server answers it, from the query to the last byte of the VOTable. Prints one line of JSON.
 * Arguments: entries, cones.
 */
import { mkdtemp, rm } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { sql } from 'kysely'
import { openDatabase } from '@/db/connection'
import { migrateToLatest } from '@/db/migrator'
import { entriesInWindows } from '@/db/queries/release-cones'
import { insertPerson } from '@/db/queries/people'
import { findReleaseById } from '@/db/queries/releases'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'
import { CampaignInput } from '@/lib/work/campaigns/campaign-input'
import { createCampaign } from '@/lib/work/campaigns/create-campaign'
import { RuleInput } from '@/lib/work/campaigns/rule-input'
import { coneDocument } from '@/lib/work/releases/cone-document'
import { readConeQuery } from '@/lib/work/releases/cone-query'
import { windowsOf } from '@/lib/work/releases/search-cone'
import { addReleaseAt } from '@/tests/_support/released-entries'

export interface ConeRun {
  entries: number
  fillSeconds: number
  /** Sorted times in ms of each kind of cone, by the clock and of the processor, and the size of its answers on average. */
  kinds: { what: string; times: number[]; cpu: number[]; bytes: number }[]
  plan: string[]
  rssMb: number
}

const NOW = '2026-01-01T00:00:00.000Z'
const SURVEY = { raDeg: 150, decDeg: 2, sideDeg: Math.sqrt(20) }

const [entries = 1_000_000, cones = 300] = process.argv.slice(2).map(Number)
const folder = await mkdtemp(join(tmpdir(), 'ringside-cones-'))
try {
  const db = openDatabase(join(folder, 'ringside.sqlite'))
  await migrateToLatest(db)
  const email = 'avocet@saltmarsh.test'
  const id = await insertPerson(db, { email, name: 'avocet', passwordHash: null, isAdmin: true, now: NOW })
  const input = CampaignInput.parse({ name: 'North', survey: 'Saltmarsh Wide Survey', acronym: 'SWS', bands: 'g r i' })
  const campaign = await createCampaign(db, { id, name: 'avocet', email, isAdmin: true }, input, RuleInput.parse({}))
  const random = new SeededRandom(20261201)
  const anywhere = () => [random.uniform() * 359.999999, (Math.asin(2 * random.uniform() - 1) * 180) / Math.PI] as const
  const inSurvey = () =>
    [
      SURVEY.raDeg + (random.uniform() - 0.5) * SURVEY.sideDeg,
      SURVEY.decDeg + (random.uniform() - 0.5) * SURVEY.sideDeg,
    ] as const
  const started = performance.now()
  const places = Array.from({ length: entries }, (_, k) => (k % 2 === 0 ? anywhere() : inSurvey()))
  // A cone looks at entries alone, and a million candidates take minutes to fill in.
  await sql`pragma foreign_keys = off`.execute(db)
  const releaseId = await addReleaseAt(db, campaign, id, places, { candidates: false })
  await sql`analyze`.execute(db)
  const fillSeconds = (performance.now() - started) / 1000
  const release = (await findReleaseById(db, releaseId))!

  const ask = async (query: string) => {
    const began = performance.now()
    const used = process.cpuUsage()
    let bytes = 0
    const asked = readConeQuery(new URLSearchParams(query))
    const document = await coneDocument({ db, release, query: asked, siteUrl: 'http://127.0.0.1:3000', token: null })
    for await (const chunk of document) bytes += chunk.length
    const { user, system } = process.cpuUsage(used)
    return { ms: performance.now() - began, cpuMs: (user + system) / 1000, bytes }
  }
  const kinds: ConeRun['kinds'] = []
  const time = async (what: string, place: () => readonly [number, number], more: string, count: number) => {
    const times: number[] = []
    const cpu: number[] = []
    let bytes = 0
    for (let k = 0; k < count; k++) {
      const [ra, dec] = place()
      const answer = await ask(`RA=${ra}&DEC=${dec}&${more}`)
      if (k >= Math.min(20, count / 10)) {
        times.push(answer.ms)
        cpu.push(answer.cpuMs)
      }
      bytes += answer.bytes
    }
    kinds.push({
      what,
      times: times.sort((a, b) => a - b),
      cpu: cpu.sort((a, b) => a - b),
      bytes: Math.round(bytes / count),
    })
  }
  await time('1 arcmin anywhere', anywhere, 'SR=0.016667', cones)
  await time('0.5 deg anywhere', anywhere, 'SR=0.5', cones)
  await time('2 deg anywhere', anywhere, 'SR=2', cones)
  await time('10 arcsec in the survey', inSurvey, 'SR=0.0028', cones)
  await time('1 arcmin in the survey', inSurvey, 'SR=0.016667', cones)
  await time('1 arcmin round a pole', () => [random.uniform() * 360, 89.999], 'SR=0.016667', cones)
  await time('0.1 deg in the survey, about 800 entries', inSurvey, 'SR=0.1&VERB=1', cones)
  await time('5 deg round the survey, the nearest 1,000 of 500,000', () => [150, 2], 'SR=5&MAXREC=1000&VERB=1', 5)
  const windows = windowsOf({ raDeg: 150, decDeg: 2, radiusDeg: 0.5 })
  const compiled = entriesInWindows(db, releaseId, windows, 4001).compile(db)
  const plan = await db.executeQuery<{ detail: string }>({ ...compiled, sql: `explain query plan ${compiled.sql}` })
  const run: ConeRun = {
    entries,
    fillSeconds,
    kinds,
    plan: plan.rows.map(({ detail }) => detail),
    rssMb: Math.round(process.memoryUsage().rss / 2 ** 20),
  }
  console.log(JSON.stringify(run))
  await db.destroy()
} finally {
  await rm(folder, { recursive: true, force: true })
}
