// A grade that was committed and never answered, grades whose leases lapsed while they waited, and a picture that keeps its size.
import path from 'node:path'
import type { Browser, BrowserContext, Page } from 'playwright-core'
import { afterAll, afterEach, beforeAll, beforeEach, expect, it } from 'vitest'
import { openDatabase } from '@/db/connection'
import { BENCH, headingOf, signIn, startBenchSite, untilGradable } from './_bench-site'
import { launchBrowser } from './_browser'
import { removeDataFolder, type TestServer } from './_server'

const CANDIDATES = 30

let server: TestServer
let browser: Browser
let context: BrowserContext
let page: Page

async function withDatabase<T>(work: (db: ReturnType<typeof openDatabase>) => Promise<T>): Promise<T> {
  const db = openDatabase(path.join(server.dataFolder, 'ringside.sqlite'))
  try {
    return await work(db)
  } finally {
    await db.destroy()
  }
}
const gradesOf = (names: readonly string[]) =>
  withDatabase((db) =>
    db
      .selectFrom('grade')
      .innerJoin('candidate', 'candidate.id', 'grade.candidate_id')
      .select(['candidate.name', 'grade.grade', 'grade.occasion', 'grade.replaces'])
      .where('candidate.name', 'in', names)
      .orderBy('grade.id')
      .execute(),
  )
const saveLine = () => page.locator('[data-save-line]').first().textContent()

async function gradeOne(letter: string): Promise<string> {
  const name = (await headingOf(page))!
  await untilGradable(page)
  await page.keyboard.press(letter)
  await page.waitForFunction((before) => document.querySelector('h1')?.textContent !== before, name)
  return name
}

beforeAll(async () => {
  server = await startBenchSite(CANDIDATES)
  browser = await launchBrowser()
})
afterAll(async () => {
  await browser?.close()
  await server?.stop()
  if (server) await removeDataFolder(server.dataFolder)
})
beforeEach(async () => {
  context = await browser.newContext({ viewport: { width: 1440, height: 900 } })
  await signIn(context, server.url)
  page = await context.newPage()
  await page.goto(`${server.url}${BENCH}`, { waitUntil: 'networkidle' })
})
afterEach(() => context.close())

it('a grade that the server took while its answer was lost is there once', async () => {
  let lost = 0
  await context.route('**/grade', async (route) => {
    if (route.request().method() !== 'PUT' || lost >= 2) return route.continue()
    lost++
    await route.fetch()
    await route.abort()
  })
  const name = await gradeOne('b')
  await expect.poll(saveLine, { timeout: 20_000 }).toBe('All grades saved')
  expect(lost).toBe(2)
  expect(await gradesOf([name])).toMatchObject([{ grade: 'B', occasion: 'first', replaces: null }])
})

it('grades whose leases lapsed while others filled their candidates are kept as late, and the person reads it', async () => {
  await context.setOffline(true)
  const names = [await gradeOne('a'), await gradeOne('n'), await gradeOne('c')]
  await withDatabase(async (db) => {
    await db.deleteFrom('lease').execute()
    await db.updateTable('candidate').set({ grades_given: 99 }).where('name', 'in', names).execute()
  })
  await context.setOffline(false)
  await page.getByRole('button', { name: '3 came with a note' }).click({ timeout: 30_000 })
  await page
    .getByRole('dialog')
    .getByText(/It came when this candidate had all its looks/)
    .first()
    .waitFor()
  expect(await gradesOf(names)).toMatchObject(
    ['A', 'N', 'C'].map((grade) => ({ grade, occasion: 'late', replaces: null })),
  )
})

it.each([
  ['a desk', { width: 1440, height: 900 }],
  ['a phone', { width: 390, height: 844 }],
  ['a phone held sideways', { width: 844, height: 390 }],
])('five grades that are refused leave the picture as it is on %s', async (_, viewport) => {
  await page.setViewportSize(viewport)
  await untilGradable(page)
  const side = async () => (await page.locator('figure img[aria-hidden="false"]').boundingBox())!
  const before = await side()
  await context.route('**/grade', (route) =>
    route.request().method() === 'PUT'
      ? route.fulfill({
          status: 409,
          contentType: 'application/problem+json',
          body: JSON.stringify({ type: 'urn:ringside:problem:judgement-seen', detail: 'It stands as you gave it.' }),
        })
      : route.continue(),
  )
  for (let n = 0; n < 5; n++) await gradeOne('n')
  const line = page.getByRole('button', { name: '5 grades were not taken' })
  await line.waitFor()
  await untilGradable(page)
  expect(await side()).toEqual(before)
  await line.click()
  await page.getByRole('dialog').getByText('It stands as you gave it.').nth(4).waitFor()
})
