import type { BrowserContext, Page } from 'playwright-core'
import { expect, vi } from 'vitest'
import { smallSearch } from '@/tests/_support/survey-files'
import { EMAIL, PASSWORD, seedSite, signInCookie, SLUG } from '@/tests/_support/survey-site'
import { makeDataFolder, startTestServer, type TestServer } from './_server'

export const BENCH = `/campaigns/${SLUG}/bench`

/** A server whose one campaign has so many imaged candidates. */
export async function startBenchSite(candidates: number, search = smallSearch): Promise<TestServer> {
  // Before the first request: the server hangs up on whoever falls silent for some seconds.
  const files = search(candidates)
  const dataFolder = await makeDataFolder()
  await seedSite(dataFolder)
  const server = await startTestServer(dataFolder)
  const cookie = await signInCookie(server.url)
  const send = async () => {
    for (let file = files.pop(); file; file = files.pop()) {
      const url = `${server.url}/api/campaigns/${SLUG}/files/${file.name}`
      const answer = await fetch(url, { method: 'PUT', headers: { cookie }, body: Buffer.from(file.bytes()) })
      if (!answer.ok) throw new Error(`${file.name}: ${answer.status} ${await answer.text()}`)
    }
  }
  await Promise.all([send(), send(), send(), send()])
  const imaged = async () => {
    const answer = await fetch(`${server.url}/api/campaigns/${SLUG}/files?limit=1`, { headers: { cookie } })
    return ((await answer.json()) as { summary: { imaged: number } }).summary.imaged
  }
  await vi.waitFor(async () => expect(await imaged()).toBe(3 * candidates), { timeout: 120_000, interval: 300 })
  return server
}

export async function fillSignIn(page: Page): Promise<void> {
  await page.getByLabel('E-mail').fill(EMAIL)
  await page.getByLabel('Password', { exact: true }).fill(PASSWORD)
  await page.keyboard.press('Enter')
}

export async function signIn(context: BrowserContext, url: string): Promise<void> {
  const page = await context.newPage()
  await page.goto(`${url}/signin`, { waitUntil: 'networkidle' })
  await fillSignIn(page)
  await page.waitForURL((address) => address.pathname !== '/signin')
  await page.close()
}

export const headingOf = (page: Page) => page.locator('h1').textContent()

/** Until the picture is there and the moment has passed in which a key is not heard. */
export async function untilGradable(page: Page): Promise<void> {
  await page.waitForFunction(() => {
    const image = document.querySelector<HTMLImageElement>('figure img[aria-hidden="false"]')
    return image?.complete && image.naturalWidth > 0
  })
  await page.waitForTimeout(140)
}
