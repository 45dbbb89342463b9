// Not one grade is lost: fifty given while the network is away, the page closed and opened again in between, the server killed
// and started again, and each of them is in the database once with its letter.
import path from 'node:path'
import type { Browser, BrowserContext, Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { openDatabase } from '@/db/connection'
import { BENCH, fillSignIn, headingOf, signIn, startBenchSite, untilGradable } from './_bench-site'
import { collectErrors, launchBrowser } from './_browser'
import { removeDataFolder, startTestServer, type TestServer } from './_server'

const CANDIDATES = 90
const WARM = 6
const LETTERS = ['n', 'c', 'b', 'a', 'n', 'u'] as const

let server: TestServer
let browser: Browser
let context: BrowserContext
let page: Page
const given = new Map<string, string>()
let errors: string[] = []

const heading = () => headingOf(page)
const saveLine = () => page.locator('[data-save-line]').first().textContent()

/** Grades what is on the stage, once its picture is there and the moment has passed in which a key is not heard. */
async function gradeOne(): Promise<void> {
  const name = (await heading())!
  const letter = LETTERS[given.size % LETTERS.length]
  await untilGradable(page)
  await page.keyboard.press(letter)
  await page.waitForFunction((before) => document.querySelector('h1')?.textContent !== before, name)
  expect(given.has(name), `${name} came twice`).toBe(false)
  given.set(name, letter.toUpperCase())
}

async function openBench(): Promise<void> {
  page = await context.newPage()
  page.setDefaultTimeout(20_000)
  errors = collectErrors(page)
  // The browser notes 250 unless told otherwise.
  await page.addInitScript(() => performance.setResourceTimingBufferSize(10_000))
  // Keys are heard once the page's script runs.
  await page.goto(`${server.url}${BENCH}`, { waitUntil: 'networkidle' })
  await expect.poll(heading, { timeout: 20_000 }).toMatch(/^SWS\d{5}$/)
}

/** Until pictures of so many candidates have come ahead. */
async function untilReady(candidates: number): Promise<void> {
  const ready = () =>
    page.evaluate(() => performance.getEntriesByType('resource').filter(({ name }) => name.includes('/stamps/')).length)
  const pictures = await page.locator('figure img').count()
  await expect.poll(ready, { timeout: 30_000 }).toBeGreaterThanOrEqual(candidates * pictures)
  await page.waitForLoadState('networkidle')
}

async function gradesInDatabase() {
  const db = openDatabase(path.join(server.dataFolder, 'ringside.sqlite'))
  try {
    return await db
      .selectFrom('grade')
      .innerJoin('candidate', 'candidate.id', 'grade.candidate_id')
      .select(['candidate.name', 'grade.grade', 'grade.uid', 'grade.replaces'])
      .execute()
  } finally {
    await db.destroy()
  }
}

beforeAll(async () => {
  server = await startBenchSite(CANDIDATES)
  browser = await launchBrowser()
  context = await browser.newContext({ viewport: { width: 1440, height: 900 } })
  await signIn(context, server.url)
})

afterAll(async () => {
  await browser?.close()
  await server?.stop()
  if (server) await removeDataFolder(server.dataFolder)
})

describe('fifty grades without a network', () => {
  it('wait on the bench, the first half through closing the page', async () => {
    await openBench()
    for (let n = 0; n < WARM; n++) await gradeOne()
    await expect.poll(saveLine, { timeout: 20_000 }).toBe('All grades saved')
    // At this pace fifty lie ready.
    await untilReady(WARM + 26)
    await context.setOffline(true)
    for (let n = 0; n < 25; n++) await gradeOne()
    expect(await saveLine()).toMatch(/^25 waiting\. The server cannot be reached/)
    await page.close({ runBeforeUnload: false })
    expect(await gradesInDatabase()).toHaveLength(WARM)
  })

  it('are found when the page opens again, and the second half joins them', async () => {
    // The page comes, and grades still do not get through.
    await context.route('**/grade', (route) => (route.request().method() === 'PUT' ? route.abort() : route.continue()))
    await context.setOffline(false)
    await openBench()
    await expect.poll(saveLine, { timeout: 20_000 }).toMatch(/^25 waiting/)
    await untilReady(27)
    await context.setOffline(true)
    for (let n = 0; n < 25; n++) await gradeOne()
    await expect.poll(saveLine, { timeout: 20_000 }).toMatch(/^50 waiting/)
    expect(given.size).toBe(WARM + 50)
  })

  it('all arrive once the killed server is up again, each once and with its letter', async () => {
    const port = Number(new URL(server.url).port)
    await server.kill()
    await context.unroute('**/grade')
    await context.setOffline(false)
    await page.waitForTimeout(500)
    expect(await saveLine()).toMatch(/^50 waiting/)
    server = await startTestServer(server.dataFolder, port)
    await expect.poll(saveLine, { timeout: 60_000 }).toBe('All grades saved')
    const grades = await gradesInDatabase()
    expect(grades).toHaveLength(WARM + 50)
    expect(new Set(grades.map(({ uid }) => uid)).size).toBe(WARM + 50)
    expect(grades.every(({ replaces }) => replaces === null)).toBe(true)
    expect(new Map(grades.map(({ name, grade }) => [name, grade]))).toEqual(given)
    const unforeseen = errors.filter(
      (error) => !/ERR_INTERNET_DISCONNECTED|ERR_CONNECTION_REFUSED|ERR_FAILED/.test(error),
    )
    expect(unforeseen).toEqual([])
  })

  it('can be undone to the first of the sitting after all this', async () => {
    await page.reload()
    await expect.poll(heading, { timeout: 20_000 }).toMatch(/^SWS\d{5}$/)
    await expect.poll(saveLine).toBe('All grades saved')
    const names = [...given.keys()]
    await page.waitForTimeout(500)
    for (let back = 1; back <= 55; back++) await page.keyboard.press('z')
    await expect.poll(heading).toBe(names[names.length - 55])
    await page.keyboard.press('z')
    await expect.poll(heading).toBe(names[0])
  })
})

describe('two tabs of one person', () => {
  it('show the same number waiting, let go of what the other graded, and send it once', async () => {
    const first = page
    await first.keyboard.press('k')
    await openBench()
    const second = page
    const name = (await headingOf(second))!
    await expect.poll(() => headingOf(first), { timeout: 20_000 }).toBe(name)
    await context.route('**/grade', (route) => (route.request().method() === 'PUT' ? route.abort() : route.continue()))
    await untilGradable(first)
    await first.keyboard.press('c')
    await second.getByText(`You gave ${name} its C in another tab.`).waitFor()
    expect(await headingOf(second)).not.toBe(name)
    for (const tab of [first, second]) {
      const line = () => tab.locator('[data-save-line]').first().textContent()
      await expect.poll(line, { timeout: 10_000 }).toMatch(/^1 waiting/)
    }
    await context.unroute('**/grade')
    for (const tab of [first, second]) {
      const line = () => tab.locator('[data-save-line]').first().textContent()
      await expect.poll(line, { timeout: 60_000 }).toBe('All grades saved')
    }
    const grades = (await gradesInDatabase()).filter((grade) => grade.name === name)
    expect(grades).toMatchObject([{ grade: 'C', replaces: null }])
  })
})

describe('a session that has run out', () => {
  it('keeps the grade, and signing in by the link comes back to the bench, from where it is sent', async () => {
    await openBench()
    await untilGradable(page)
    const name = (await headingOf(page))!
    await context.clearCookies()
    await page.keyboard.press('b')
    await page.getByRole('link', { name: 'Sign in and come back here' }).click()
    await page.waitForURL('**/signin?next=**')
    await page.waitForLoadState('networkidle')
    await fillSignIn(page)
    await page.waitForURL(`**${BENCH}`)
    const grades = async () => (await gradesInDatabase()).filter((grade) => grade.name === name)
    await expect.poll(grades, { timeout: 30_000 }).toMatchObject([{ grade: 'B', replaces: null }])
    await expect.poll(saveLine, { timeout: 30_000 }).toBe('All grades saved')
  })
})
