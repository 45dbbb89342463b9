// What the bench looks like in each state at three widths: reachable by a thumb, accessible, and never moving under the eyes.
import type { Browser, BrowserContext, Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { BENCH, headingOf, signIn, startBenchSite, untilGradable } from './_bench-site'
import { expectAccessible, launchBrowser } from './_browser'
import { removeDataFolder, type TestServer } from './_server'

const SIZES = [
  { name: 'a desk', width: 1440, height: 900, touch: false },
  { name: 'a phone', width: 390, height: 844, touch: true },
  { name: 'a phone held sideways', width: 844, height: 390, touch: true },
] as const

let server: TestServer
let browser: Browser
const contexts: BrowserContext[] = []

beforeAll(async () => {
  server = await startBenchSite(8)
  browser = await launchBrowser()
})
afterAll(async () => {
  await browser?.close()
  await server?.stop()
  if (server) await removeDataFolder(server.dataFolder)
})

async function openBench({ width, height, touch }: (typeof SIZES)[number]): Promise<Page> {
  const context = await browser.newContext({ viewport: { width, height }, hasTouch: touch, isMobile: touch })
  contexts.push(context)
  await signIn(context, server.url)
  const page = await context.newPage()
  await page.addInitScript(() => {
    const shifts: number[] = []
    Object.assign(window, { shifts })
    new PerformanceObserver((list) => {
      for (const entry of list.getEntries()) shifts.push((entry as unknown as { value: number }).value)
    }).observe({ type: 'layout-shift', buffered: true })
  })
  await page.goto(`${server.url}${BENCH}`, { waitUntil: 'networkidle' })
  await untilGradable(page)
  return page
}

const figure = (page: Page) => page.locator('figure > div > div').first().boundingBox()

describe.each(SIZES)('on $name', (size) => {
  it('every grade is a target of 44 pixels in sight, and nothing overflows', async () => {
    const page = await openBench(size)
    for (const letter of ['A', 'B', 'C', 'N', 'U']) {
      const box = await page.getByRole('button', { name: new RegExp(`^${letter}: `) }).boundingBox()
      expect(box, letter).not.toBeNull()
      expect(box!.height, letter).toBeGreaterThanOrEqual(44)
      expect(box!.width, letter).toBeGreaterThanOrEqual(44)
      expect(box!.y + box!.height, letter).toBeLessThanOrEqual(size.height)
      expect(box!.x + box!.width, letter).toBeLessThanOrEqual(size.width)
    }
    const picture = await figure(page)
    expect(picture!.width, 'the picture is most of the shorter side').toBeGreaterThan(
      0.6 * Math.min(size.width, size.height),
    )
    expect(await page.evaluate(() => document.documentElement.scrollWidth <= innerWidth)).toBe(true)
  })

  it('is accessible as it comes, with the ruler, with its sheets and at the end, and the picture never moves', async () => {
    const page = await openBench(size)
    await expectAccessible(page)
    const before = await figure(page)
    await page.getByRole('button', { name: /Ruler/ }).click()
    await page.getByText(/east of north|pixel scale unknown/).waitFor()
    await expectAccessible(page)
    expect(await figure(page)).toEqual(before)
    await page.keyboard.press('Escape')
    await page.getByRole('button', { name: /All keys/ }).click()
    await page.getByRole('dialog').waitFor()
    await expectAccessible(page)
    await page.getByRole('button', { name: 'Change the keys' }).click()
    await page.getByRole('dialog', { name: 'Your keys' }).waitFor()
    await expectAccessible(page)
    await page.keyboard.press('Escape')
    expect(await figure(page)).toEqual(before)
    await page.context().setOffline(true)
    await page.keyboard.press('n')
    await page
      .getByText(/^1 waiting\. The server cannot be reached/)
      .first()
      .waitFor()
    expect(await figure(page)).toEqual(before)
    await page.context().setOffline(false)
    await page.getByText('All grades saved').first().waitFor()
    expect(await page.evaluate(() => (window as unknown as { shifts: number[] }).shifts)).toEqual([])
    await page.getByRole('button', { name: /Finish/ }).click()
    await expect.poll(() => headingOf(page)).toBe('Thank you for looking')
    await expectAccessible(page)
  })

  if (!size.touch) return
  it('a finger swept over the picture or held on it grades nothing', async () => {
    const page = await openBench(size)
    const name = await headingOf(page)
    const { x, y, width, height } = (await figure(page))!
    const session = await page.context().newCDPSession(page)
    const touch = (type: string, at: { x: number; y: number }[]) =>
      session.send('Input.dispatchTouchEvent', { type: type as 'touchStart', touchPoints: at })
    const middle = { x: x + width / 2, y: y + height / 2 }
    for (const by of [-120, 120]) {
      await touch('touchStart', [middle])
      for (let step = 1; step <= 6; step++) await touch('touchMove', [{ ...middle, x: middle.x + (by * step) / 6 }])
      await touch('touchEnd', [])
    }
    await touch('touchStart', [middle])
    await page.waitForTimeout(400)
    await touch('touchEnd', [])
    expect(await headingOf(page)).toBe(name)
    await page.getByRole('button', { name: /^N: / }).tap()
    await expect.poll(() => headingOf(page)).not.toBe(name)
  })
})
