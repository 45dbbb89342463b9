// Measuring in a real browser: an arc by mouse and by keyboard, a lens fitted to it, both saved, seen by another and opened again.
import type { Browser, BrowserContext, Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { fullSearch } from '@/tests/_support/survey-files'
import { SLUG } from '@/tests/_support/survey-site'
import { signIn, startBenchSite } from './_bench-site'
import { collectErrors, expectAccessible, launchBrowser } from './_browser'
import { removeDataFolder, type TestServer } from './_server'

let server: TestServer
let browser: Browser
let context: BrowserContext
let page: Page
let errors: string[]

const CANDIDATE = `/campaigns/${SLUG}/candidates/1`
const stage = () => page.locator('[data-measuring]')
const panel = () => page.getByRole('region', { name: 'Measure' })
const points = () => page.getByRole('button', { name: /^Point \d/ })
const list = () => page.getByRole('heading', { name: 'Measured on the picture' }).locator('..')

/** A press on the picture, in shares of its side from the middle. */
async function press(right: number, down: number): Promise<void> {
  const box = await stage().boundingBox()
  if (!box) throw new Error('no picture')
  await page.mouse.click(box.x + (0.5 + right) * box.width, box.y + (0.5 + down) * box.height)
}

beforeAll(async () => {
  // Simulated before the server is spoken to: it takes longer than an idle connection is kept.
  const files = fullSearch(1)
  server = await startBenchSite(1, () => files)
  browser = await launchBrowser()
  context = await browser.newContext({ viewport: { width: 1440, height: 900 }, colorScheme: 'dark' })
  await signIn(context, server.url)
  page = await context.newPage()
  page.setDefaultTimeout(30_000)
  errors = collectErrors(page)
  await page.goto(`${server.url}${CANDIDATE}`, { waitUntil: 'networkidle' })
})

afterAll(async () => {
  await browser?.close()
  await server?.stop()
  if (server) await removeDataFolder(server.dataFolder)
})

describe('measuring', () => {
  it('an arc: presses make points, a drag moves one, the radius follows and is saved', async () => {
    await page.getByRole('button', { name: 'Measure an arc' }).click()
    const radius = 0.12
    for (const turn of [0.3, 1.5, 2.7, 3.9, 5.1]) await press(radius * Math.cos(turn), radius * Math.sin(turn))
    await expect.poll(() => points().count()).toBe(5)
    // A cutout of 80 pixels of 0.2 arcsec spans 16.
    await expect
      .poll(() =>
        panel()
          .getByText(/^1\.9\d+ ± 0\.0\d+″$/)
          .count(),
      )
      .toBe(1)
    await expectAccessible(page)
    const first = await points().first().boundingBox()
    const [x, y] = [first!.x + first!.width / 2, first!.y + first!.height / 2]
    await page.mouse.move(x, y)
    await page.mouse.down()
    await page.mouse.move(x + 60, y + 60, { steps: 5 })
    await page.mouse.up()
    await expect
      .poll(() =>
        panel()
          .getByText(/^1\.9\d+ ± 0\.0\d+″$/)
          .count(),
      )
      .toBe(0)
    await page.keyboard.press('Control+z')
    await expect
      .poll(() =>
        panel()
          .getByText(/^1\.9\d+ ± 0\.0\d+″$/)
          .count(),
      )
      .toBe(1)
    await panel().getByLabel('Remark').fill('by mouse')
    await panel().getByRole('button', { name: 'Save' }).click()
    await panel().getByText('Saved.').waitFor()
    await list().getByText('by mouse').waitFor()
  })

  it('an arc by keyboard alone: cross, points, delete, and the earlier one is replaced and kept', async () => {
    await panel().getByRole('button', { name: 'Clear' }).press('Enter')
    await stage().focus()
    const walk = async (key: string, times: number) => {
      for (let k = 0; k < times; k++) await page.keyboard.press(`Shift+${key}`)
      await page.keyboard.press('Enter')
    }
    await walk('ArrowUp', 2)
    await walk('ArrowRight', 2)
    await walk('ArrowDown', 4)
    await walk('ArrowLeft', 4)
    await page.keyboard.press('Delete')
    await expect.poll(() => points().count()).toBe(3)
    // (0, 2), (-2, 2), (-2, -2) arcsec: a right angle at the second, so the circle's diameter is from first to third: sqrt 20.
    await expect
      .poll(() =>
        panel()
          .getByText(/^2\.2[34]\d* ± /)
          .count(),
      )
      .toBe(1)
    await panel().getByRole('button', { name: 'Save in place of your earlier one' }).press('Enter')
    await panel().getByText('Saved in place of your earlier one, which is kept.').waitFor()
    await list().getByText('1 replaced or withdrawn, kept').waitFor()
  })

  it('a lens: fitted to two images, with delays once there are redshifts, saved', async () => {
    await panel().getByText('Would a lens do this?').click()
    await panel().getByRole('button', { name: 'Clear' }).click()
    await panel().getByText('◦ Points').click()
    await panel().getByText('Images of one point').click()
    await press(-1.5 / 16, 0)
    await press(0.9 / 16, 0)
    await panel().getByText('Radius', { exact: true }).click()
    await panel().getByRole('button', { name: 'Fit' }).click()
    await panel()
      .getByText(/^Fitted: residual 0\.\d+″, 0\.\d+ px$/)
      .waitFor()
    expect(Number(await panel().getByLabel('Einstein radius, ″').inputValue())).toBeCloseTo(1.2, 1)
    for (const which of ['lens', 'source']) {
      await panel()
        .getByRole('group', { name: `Redshift of the ${which}` })
        .getByText('Typed')
        .click()
    }
    await panel().getByLabel('Redshift of the lens: value').fill('0.8')
    await panel().getByLabel('Redshift of the source: value').fill('0.5')
    await panel()
      .getByText(/must lie behind the lens/)
      .first()
      .waitFor()
    await panel().getByLabel('Redshift of the source: value').fill('1.5')
    await panel().getByRole('cell', { name: /days$/ }).waitFor()
    await expectAccessible(page)
    await panel().getByRole('button', { name: 'Save' }).click()
    await panel().getByText('Saved.').waitFor()
  })

  it('is there after a reload, is shown on the picture, opens read-only and can be withdrawn', async () => {
    await page.goto(`${server.url}${CANDIDATE}`, { waitUntil: 'networkidle' })
    const model = list().getByRole('listitem').filter({ hasText: 'lens model by you' })
    await model.getByRole('button', { name: 'Show on the picture' }).click()
    await model.getByRole('button', { name: 'Hide on the picture' }).waitFor()
    await model.getByRole('button', { name: 'Open' }).click()
    await page.getByRole('heading', { name: 'Measured by you' }).waitFor()
    await panel()
      .getByText(/Fitted: residual/)
      .waitFor()
    expect(await panel().getByRole('button', { name: 'Save' }).count()).toBe(0)
    await expectAccessible(page)
    await page.keyboard.press('Escape')
    await model.getByRole('button', { name: 'Withdraw' }).click()
    await list().getByText('2 replaced or withdrawn, kept').waitFor()
    await expectAccessible(page)
  })

  it('works by touch on a phone, without the page growing wider', async () => {
    const phone = await browser.newContext({
      viewport: { width: 390, height: 844 },
      isMobile: true,
      hasTouch: true,
      storageState: await context.storageState(),
    })
    const own = await phone.newPage()
    const faults = collectErrors(own)
    await own.goto(`${server.url}${CANDIDATE}`, { waitUntil: 'networkidle' })
    await own.getByRole('button', { name: 'Would a lens do this?' }).tap()
    const east = own.getByLabel('Source east, ″')
    const before = Number(await east.inputValue())
    await own.getByRole('button', { name: 'Source east: more' }).tap()
    expect(Number(await east.inputValue())).toBeGreaterThan(before)
    const box = await own.locator('[data-measuring]').boundingBox()
    expect(box!.y).toBeLessThan(200)
    expect(await own.evaluate(() => document.documentElement.scrollWidth)).toBe(390)
    await expectAccessible(own)
    expect(faults).toEqual([])
    await phone.close()
  })

  it('left no error in the console', () => expect(errors).toEqual([]))
})
