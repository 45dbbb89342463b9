import { randomUUID } from 'node:crypto'
import path from 'node:path'
import { setTimeout as pause } from 'node:timers/promises'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { openDatabase } from '@/db/connection'
import { findPersonByEmail, upsertMembership } from '@/db/queries/people'
import type { DB } from '@/db/schema'
import { addImagedCandidate } from '@/tests/_support/scenario'
import { EMAIL, seedSite, signInCookie, SLUG } from '@/tests/_support/survey-site'
import type { Kysely } from 'kysely'
import { makeDataFolder, removeDataFolder, startTestServer, type TestServer } from './_server'

const GRADERS = 50
const CANDIDATES = 60
const WANTED = 10

let server: TestServer
let db: Kysely<DB>

/** Fifty graders with the lead's password, and candidates that may be lent out. */
async function seedCrowd(dataFolder: string): Promise<void> {
  await seedSite(dataFolder)
  db = openDatabase(path.join(dataFolder, 'ringside.sqlite'))
  const lead = await findPersonByEmail(db, EMAIL)
  const campaign = await db.selectFrom('campaign').selectAll().executeTakeFirstOrThrow()
  const rule = await db.selectFrom('rule').selectAll().executeTakeFirstOrThrow()
  const { id: _, ...values } = { ...rule, version: rule.version + 1, grades_wanted: WANTED }
  await db.insertInto('rule').values(values).execute()
  const now = new Date().toISOString()
  for (let n = 0; n < GRADERS; n++) {
    const { id } = await db
      .insertInto('person')
      .values({
        email: emailOf(n),
        name: `grader ${n}`,
        password_hash: lead?.password_hash ?? null,
        created_at: now,
        left_at: null,
      })
      .returning('id')
      .executeTakeFirstOrThrow()
    const pseudonym = `G${String(n + 2).padStart(2, '0')}`
    await upsertMembership(db, { campaignId: campaign.id, personId: id, role: 'grader', pseudonym, now })
  }
  for (let n = 0; n < CANDIDATES; n++) await addImagedCandidate(db, campaign, `SWS-${n}`)
}

const emailOf = (n: number) => `grader${n}@saltmarsh.test`

beforeAll(async () => {
  const dataFolder = await makeDataFolder()
  await seedCrowd(dataFolder)
  server = await startTestServer(dataFolder)
}, 120_000)

afterAll(async () => {
  await db.destroy()
  await server.stop()
  await removeDataFolder(server.dataFolder)
})

const times = { ask: [] as number[], grade: [] as number[] }

async function timed(kind: keyof typeof times, request: () => Promise<Response>): Promise<Response> {
  const started = performance.now()
  const response = await request()
  times[kind].push(performance.now() - started)
  return response
}

/** Ids of the grades that the server has acknowledged, and of those that it has refused because the candidate was full. */
async function gradeAll(cookie: string, taken: string[], full: string[]): Promise<void> {
  const root = `${server.url}/api/campaigns/${SLUG}`
  for (;;) {
    const asked = await timed('ask', () => fetch(`${root}/queue?count=5`, { headers: { cookie } }))
    expect(asked.status).toBe(200)
    const { candidates } = (await asked.json()) as { candidates: { id: number }[] }
    if (candidates.length === 0) return
    for (const { id } of candidates) {
      // They look, each for a while of their own.
      await pause(500 + ((id * 137 + cookie.length * 31 + taken.length * 61) % 2000))
      const body = JSON.stringify({ id: randomUUID(), grade: 'ABCN'[id % 4] })
      const send = () =>
        fetch(`${root}/candidates/${id}/grade`, {
          method: 'PUT',
          headers: { cookie, 'content-type': 'application/json' },
          body,
        })
      // Every third is delivered twice at once, as an outbox does that has lost an answer.
      const answers = await Promise.all(id % 3 === 0 ? [timed('grade', send), send()] : [timed('grade', send)])
      for (const answer of answers) {
        if (answer.ok) taken.push((JSON.parse(body) as { id: string }).id)
        else {
          expect(((await answer.json()) as { type: string }).type).toBe('urn:ringside:problem:candidate-full')
          full.push(String(id))
        }
      }
    }
  }
}

const at = (sorted: readonly number[], share: number) => sorted[Math.floor(sorted.length * share)]

it('takes the grades of fifty people at once: none lost, none twice, none above the wanted number, and all that are wanted', async () => {
  const cookies: string[] = []
  for (let n = 0; n < GRADERS; n++) cookies.push(await signInCookie(server.url, emailOf(n)))
  const taken: string[] = []
  const full: string[] = []
  await Promise.all(cookies.map((cookie) => gradeAll(cookie, taken, full)))
  const kept = await db.selectFrom('grade').select('uid').execute()
  expect(kept.map(({ uid }) => uid).toSorted()).toEqual([...new Set(taken)].toSorted())
  const given = await db.selectFrom('candidate').select('grades_given').execute()
  expect(given.map((row) => row.grades_given)).toEqual(Array(CANDIDATES).fill(WANTED))
  expect(full).toEqual([])
  for (const [kind, all] of Object.entries(times)) {
    all.sort((a, b) => a - b)
    const [median, p95, longest] = [at(all, 0.5), at(all, 0.95), all[all.length - 1]].map((ms) => ms.toFixed(0))
    process.stdout.write(
      `fifty graders, ${kind}: median ${median}, p95 ${p95}, longest ${longest} ms of ${all.length}\n`,
    )
  }
}, 600_000)
