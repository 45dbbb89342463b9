// The first pass from the settings to the bench: by keys, without a network, and back.
import type { Browser, Page } from 'playwright-core'
import { afterAll, beforeAll, expect, it, vi } from 'vitest'
import { SLUG } from '@/tests/_support/survey-site'
import { BENCH, signIn, startBenchSite } from './_bench-site'
import { collectErrors, expectAccessible, launchBrowser } from './_browser'
import { removeDataFolder, type TestServer } from './_server'

const CANDIDATES = 8
const HOME = `/campaigns/${SLUG}`

let server: TestServer
let browser: Browser

beforeAll(async () => {
  server = await startBenchSite(CANDIDATES)
  browser = await launchBrowser()
}, 180_000)
afterAll(async () => {
  await browser?.close()
  await server?.stop()
  if (server) await removeDataFolder(server.dataFolder)
})

const stamps = (page: Page) => page.getByRole('button', { name: /send on$/ })
const waiting = (page: Page) =>
  page.evaluate(
    () =>
      new Promise<number>((resolve, reject) => {
        const opening = indexedDB.open('ringside-bench')
        opening.onerror = () => reject(new Error('No database.'))
        opening.onsuccess = () => {
          const counting = opening.result.transaction('marks').objectStore('marks').count()
          counting.onsuccess = () => {
            opening.result.close()
            resolve(counting.result)
          }
        }
      }),
  )

async function openSheet(page: Page, count: number): Promise<void> {
  await page.goto(`${server.url}${HOME}/sheet`, { waitUntil: 'networkidle' })
  await vi.waitFor(async () => expect(await stamps(page).count()).toBe(count), { timeout: 10_000 })
}

it('sends on by key what the bench then serves, and keeps marks while the network is away', async () => {
  const context = await browser.newContext({ viewport: { width: 1440, height: 900 } })
  await signIn(context, server.url)
  const page = await context.newPage()
  const errors = collectErrors(page)

  await page.goto(`${server.url}${HOME}/settings`, { waitUntil: 'networkidle' })
  await page.getByRole('checkbox', { name: /A first pass over the sheet/ }).check()
  await page.getByRole('button', { name: 'Save the first pass' }).click()
  await page.getByText('Only what the first pass sends on comes to the bench now').waitFor()

  await openSheet(page, CANDIDATES)
  await expectAccessible(page)
  const chosen = await stamps(page).nth(1).getAttribute('aria-label')
  await page.keyboard.press('ArrowRight')
  await page.keyboard.press('s')
  await page.keyboard.press('e')
  await page.getByRole('dialog').waitFor()
  await expectAccessible(page)
  await page.keyboard.press('Escape')
  await vi.waitFor(async () => expect(await waiting(page)).toBe(0))

  await context.setOffline(true)
  await page.keyboard.press('n')
  await page.getByText(`${CANDIDATES - 1} stamps go no further, 1 to the bench.`).waitFor()
  await page.keyboard.press('n')
  await page.getByRole('alert').getByText('The server cannot be reached.').waitFor()
  expect(await waiting(page)).toBe(CANDIDATES - 1)
  await context.setOffline(false)
  await page.reload({ waitUntil: 'networkidle' })
  await vi.waitFor(async () => expect(await waiting(page)).toBe(0), { timeout: 15_000 })
  await page.getByRole('heading', { name: 'The first pass is through' }).waitFor()

  const queue = await context.request.get(`${server.url}/api/campaigns/${SLUG}/queue?count=20`)
  const { candidates } = (await queue.json()) as { candidates: { name: string }[] }
  expect(candidates.map(({ name }) => `${name}, send on`)).toEqual([chosen])
  await page.goto(`${server.url}${BENCH}`, { waitUntil: 'networkidle' })
  expect(`${await page.locator('h1').textContent()}, send on`).toBe(chosen)

  expect(errors.filter((error) => !/ERR_INTERNET_DISCONNECTED|Failed to fetch/.test(error))).toEqual([])
  await context.close()
})

it('lets a lead send on from its page what was dropped, and nothing overflows on a phone', async () => {
  const context = await browser.newContext({ viewport: { width: 390, height: 844 }, hasTouch: true, isMobile: true })
  await signIn(context, server.url)
  const page = await context.newPage()
  await page.goto(`${server.url}${HOME}/candidates?state=not+sent+on`, { waitUntil: 'networkidle' })
  await page.getByRole('link', { name: /^SWS/ }).first().click()
  await page.getByRole('button', { name: 'Send on to the bench' }).click()
  await page.getByRole('button', { name: 'Send on to the bench' }).waitFor({ state: 'detached' })
  const queue = await context.request.get(`${server.url}/api/campaigns/${SLUG}/queue?count=20`)
  expect(((await queue.json()) as { candidates: unknown[] }).candidates).toHaveLength(2)
  await page.goto(`${server.url}${HOME}/sheet`, { waitUntil: 'networkidle' })
  await page.getByRole('heading', { name: 'The first pass is through' }).waitFor()
  expect(await page.evaluate(() => document.documentElement.scrollWidth)).toBe(390)
  await expectAccessible(page)
  await context.close()
})
