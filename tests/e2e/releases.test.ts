// A release from the form to a file on a reader's disk: published, killed in between, opened, downloaded, recomputed, corrected, withdrawn.
import { execFileSync } from 'node:child_process'
import { createHash } from 'node:crypto'
import { mkdtemp, rm, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import path from 'node:path'
import type { Browser, Page } from 'playwright-core'
import { afterAll, beforeAll, expect, it, vi } from 'vitest'
import { openDatabase } from '@/db/connection'
import { insertPerson, upsertMembership } from '@/db/queries/people'
import type { Role } from '@/db/schema/people'
import { permitCampaign } from '@/lib/work/people/permission'
import { ruleOnCandidate } from '@/lib/work/rulings/rule-on-candidate'
import { EMAIL, signInCookie, SLUG } from '@/tests/_support/survey-site'
import { signIn, startBenchSite } from './_bench-site'
import { collectErrors, expectAccessible, launchBrowser } from './_browser'
import { removeDataFolder, startTestServer, type TestServer } from './_server'

const CONFIRMED = 3
const HOME = `/campaigns/${SLUG}/releases`
const VIEWER = 'egret@saltmarsh.test'
const GRADER = 'curlew@saltmarsh.test'

let server: TestServer
let browser: Browser
let page: Page
let folder: string
const errors: string[][] = []

/** Confirms the first candidates as a lead would, and adds a viewer and a grader with the lead's password. */
async function prepare(dataFolder: string): Promise<void> {
  const db = openDatabase(path.join(dataFolder, 'ringside.sqlite'))
  const person = await db.selectFrom('person').selectAll().where('email', '=', EMAIL).executeTakeFirstOrThrow()
  const viewer = { id: person.id, name: person.name, email: EMAIL, isAdmin: true }
  const permit = await permitCampaign(db, viewer, SLUG, 'lead')
  const candidates = await db.selectFrom('candidate').select('id').orderBy('id').limit(CONFIRMED).execute()
  for (const { id } of candidates) {
    await ruleOnCandidate(db, permit, id, { outcome: 'confirmed', grade: 'A', reason: 'Arc and counter-image.' })
  }
  for (const [email, role, pseudonym] of [
    [VIEWER, 'viewer', 'G80'],
    [GRADER, 'grader', 'G81'],
  ] as [string, Role, string][]) {
    const now = new Date().toISOString()
    const name = email.split('@')[0]
    const personId = await insertPerson(db, { email, name, passwordHash: person.password_hash, isAdmin: false, now })
    await upsertMembership(db, { campaignId: permit.campaign.id, personId, role, pseudonym, now })
  }
  await db.destroy()
}

beforeAll(async () => {
  server = await startBenchSite(6)
  await prepare(server.dataFolder)
  folder = await mkdtemp(path.join(tmpdir(), 'ringside-e2e-release-'))
  browser = await launchBrowser()
  const context = await browser.newContext({ viewport: { width: 1440, height: 900 } })
  await signIn(context, server.url)
  page = await context.newPage()
  page.setDefaultTimeout(30_000)
  errors.push(collectErrors(page))
}, 240_000)
afterAll(async () => {
  await browser?.close()
  await server?.stop()
  if (server) await removeDataFolder(server.dataFolder)
  if (folder) await rm(folder, { recursive: true, force: true })
})

const visit = (address: string) => page.goto(`${server.url}${address}`)
const file = (number: number, name: string) => `${server.url}/api/campaigns/${SLUG}/releases/${number}/files/${name}`
const card = (number: number) => page.getByRole('listitem').filter({ has: page.locator(`#release-${number}`) })

async function fetched(
  address: string,
  cookie?: string,
): Promise<{ status: number; bytes: Buffer; etag: string | null }> {
  const answer = await fetch(address, { headers: cookie ? { cookie } : {} })
  return { status: answer.status, bytes: Buffer.from(await answer.arrayBuffer()), etag: answer.headers.get('etag') }
}

async function untilMade(number: number): Promise<void> {
  await card(number)
    .getByRole('link', { name: /^RELEASE\.zip/ })
    .waitFor({ timeout: 60_000 })
}

async function freeze(): Promise<void> {
  await page.getByLabel('I have read both.').check()
  await page.getByRole('button', { name: /^Freeze release/ }).click()
  await page.waitForURL((address) => address.pathname === HOME)
}

it('keeps what was typed when something is missing, then freezes, and comes through a killed server', async () => {
  await visit(HOME)
  await expectAccessible(page)
  await page.getByRole('link', { name: 'Prepare release 1' }).click()
  await page.getByLabel('Authors').fill('Heron, Grey')
  await page.getByRole('button', { name: 'Freeze release 1' }).click()
  await page.getByText('Say in a few sentences what this catalogue is.').waitFor()
  expect(await page.getByLabel('Authors').inputValue()).toBe('Heron, Grey')
  await expectAccessible(page)
  await page.getByLabel('Description').fill('Candidates with arcs.')
  await freeze()

  const port = Number(new URL(server.url).port)
  await server.kill()
  server = await startTestServer(server.dataFolder, port)
  await visit(HOME)
  await untilMade(1)
  await expectAccessible(page)
  await card(1).getByText(`${CONFIRMED} entries of`, { exact: false }).waitFor()
})

it('is read by leads and viewers while it is private, and by nobody else', async () => {
  const statuses = await Promise.all(
    [EMAIL, VIEWER, GRADER].map(
      async (email) => (await fetched(file(1, 'catalogue.csv'), await signInCookie(server.url, email))).status,
    ),
  )
  expect(statuses).toEqual([200, 200, 404])
  expect((await fetched(file(1, 'catalogue.csv'))).status).toBe(404)
})

it('gives viewers the list without a way to change it, and graders no list at all', async () => {
  for (const [email, sees] of [
    [VIEWER, true],
    [GRADER, false],
  ] as const) {
    const context = await browser.newContext()
    const [name, ...value] = (await signInCookie(server.url, email)).split('; ').at(-1)!.split('=')
    await context.addCookies([{ name, value: value.join('='), url: server.url }])
    const other = await context.newPage()
    await other.goto(`${server.url}${HOME}`, { waitUntil: 'networkidle' })
    expect(await other.getByRole('heading', { name: /^Release 1:/ }).count()).toBe(sees ? 1 : 0)
    expect(await other.getByRole('radio').count()).toBe(0)
    await other.goto(`${server.url}${HOME}/new`, { waitUntil: 'networkidle' })
    expect(await other.getByRole('button', { name: /Freeze/ }).count()).toBe(0)
    await context.close()
  }
})

it('is opened by a link that works without an account, and to all once the acronym is said to be registered', async () => {
  await visit(HOME)
  await card(1)
    .getByRole('radio', { name: /^By link/ })
    .check()
  await card(1).getByRole('button', { name: 'Make a link' }).click()
  const link = await card(1)
    .getByText(/\?key=/)
    .textContent()
  const key = new URL(link!).searchParams.get('key')!
  expect((await fetched(`${file(1, 'catalogue.csv')}?key=${key}`)).status).toBe(200)
  expect((await fetched(`${file(1, 'catalogue.csv')}?key=${key.slice(1)}`)).status).toBe(404)

  await card(1)
    .getByRole('radio', { name: /^Public/ })
    .check()
  await card(1).getByRole('button', { name: 'Make it public' }).click()
  await card(1).getByRole('alert').filter({ hasText: 'must be registered' }).waitFor()
  expect((await fetched(file(1, 'catalogue.csv'))).status).toBe(404)
  await card(1)
    .getByRole('checkbox', { name: /acronym SWS is registered/ })
    .check()
  await card(1).getByRole('button', { name: 'Make it public' }).click()
  await vi.waitFor(async () => expect((await fetched(file(1, 'catalogue.csv'))).status).toBe(200), { timeout: 10_000 })
})

it('is downloaded whole, is known again by its hash, and every verdict is recomputed from it', async () => {
  const { bytes, etag } = await fetched(file(1, 'RELEASE.zip'))
  expect(etag).toBe(`"${createHash('sha256').update(bytes).digest('hex')}"`)
  const again = await fetch(file(1, 'RELEASE.zip'), { headers: { 'if-none-match': etag! } })
  expect(again.status).toBe(304)
  const archive = path.join(folder, 'RELEASE.zip')
  await writeFile(archive, bytes)
  const reproduce = (name: string) =>
    execFileSync('npm', ['run', '-s', 'reproduce', '--', name], { encoding: 'utf8', stdio: ['ignore', 'pipe', 'pipe'] })
  expect(reproduce(archive)).toMatch(/All \d+ verdicts agree\.\n$/)
  await writeFile(archive, bytes.subarray(0, bytes.length - 100))
  expect(() => reproduce(archive)).toThrow(/cannot be opened as a zip archive/)
  expect((await fetched(file(1, 'nothing.csv'))).status).toBe(404)
})

it('is corrected by an erratum and withdrawn by a retraction, which it names, while its own files stay as they are', async () => {
  const before = (await fetched(file(1, 'RELEASE.zip'))).etag
  await visit(HOME)
  await card(1).getByRole('link', { name: 'Correct it by an erratum' }).click()
  await page.getByLabel('What was wrong with it').fill('One entry was its neighbour.')
  await freeze()
  await untilMade(2)
  await card(1).getByText('Corrected by release 2.').waitFor()
  await card(1).getByRole('link', { name: 'Withdraw it' }).click()
  await page.getByLabel('Why it is withdrawn').fill('The field was another one.')
  await expectAccessible(page)
  await freeze()
  await card(3)
    .getByRole('link', { name: /^README\.txt/ })
    .waitFor({ timeout: 60_000 })
  await card(1).getByText('Withdrawn by release 3.').waitFor()
  await expectAccessible(page)
  expect(await card(1).getByRole('link', { name: 'Withdraw it' }).count()).toBe(0)
  expect((await fetched(file(1, 'RELEASE.zip'))).etag).toBe(before)
  const cookie = await signInCookie(server.url)
  expect((await fetched(file(3, 'README.txt'), cookie)).bytes.toString()).toContain('THIS IS A RETRACTION')
})

it('threw nothing in the browser', () => {
  const expected = /status of 40[0-9]|ERR_CONNECTION|Failed to fetch|net::ERR/
  expect(errors.flat().filter((error) => !expected.test(error))).toEqual([])
})
