/** The public pages of releases in a browser without script, and with it for what axe needs: read, sorted, filtered, followed, closed. */
import type { Browser, BrowserContext, Page } from 'playwright-core'
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest'
import { collectErrors, expectAccessible, launchBrowser } from './_browser'
import { ENTRIES, makeReleases, SLUG, TOKEN } from './_released'
import { makeDataFolder, removeDataFolder, startTestServer, type TestServer } from './_server'

let server: TestServer
let dataFolder = ''
let picture = ''
let browser: Browser
let context: BrowserContext | null = null
beforeAll(async () => {
  dataFolder = await makeDataFolder()
  picture = (await makeReleases(dataFolder)).picture
  server = await startTestServer(dataFolder)
  browser = await launchBrowser()
})
afterEach(async () => {
  await context?.close()
  context = null
})
afterAll(async () => {
  await browser?.close()
  await server?.stop()
  await removeDataFolder(dataFolder)
})

const PHONE = { width: 390, height: 844 }

async function open(path: string, { script = false, viewport = { width: 1280, height: 900 } } = {}): Promise<Page> {
  context = await browser.newContext({ javaScriptEnabled: script, viewport })
  const page = await context.newPage()
  await page.goto(`${server.url}${path}`)
  return page
}

const release = (number: number | string) => `/r/${SLUG}/${number}`
const designations = (page: Page) => page.locator('tbody th[scope=row] a').allTextContents()

describe('the page of a public release, without script', () => {
  it('says what it is, what it is not, how to cite it, and has its map, entries and files', async () => {
    const page = await open(release(2))
    expect(await page.getByRole('heading', { level: 1 }).textContent()).toBe('Second look')
    expect(await page.getByText('not spectroscopic confirmations').count()).toBeGreaterThan(0)
    expect(await page.getByText('must be registered').count()).toBeGreaterThan(0)
    expect(await page.locator('blockquote').textContent()).toBe('Saltmarsh (2026).')
    expect(await page.locator('svg[aria-labelledby="sky-title sky-desc"]').isVisible()).toBe(true)
    expect(await page.getByRole('link', { name: 'RELEASE.zip' }).getAttribute('href')).toBe(
      `${release(2)}/files/RELEASE.zip`,
    )
    expect(await designations(page)).toHaveLength(50)
  })

  it('is paged and sorted by links', async () => {
    const page = await open(release(2))
    await page.getByRole('link', { name: 'Last' }).click()
    expect(await designations(page)).toHaveLength(ENTRIES - 100)
    await page.getByRole('link', { name: 'Mean' }).click()
    expect(await page.getByRole('columnheader', { name: /Mean/ }).getAttribute('aria-sort')).toBe('descending')
    const classes = await page.locator('tbody tr td:nth-child(5)').allTextContents()
    expect(new Set(classes)).toEqual(new Set(['A', 'B']))
    expect(new URL(page.url()).search).toBe('?sort=-mean')
  })

  it('is filtered by a form, over right ascension 0 too, and cleared', async () => {
    const page = await open(release(2))
    await page.getByLabel('Near a position').fill('0:00:00 +02:00:00')
    await page.getByRole('textbox', { name: 'Within' }).fill('1.3')
    await page.getByRole('button', { name: 'Show' }).click()
    expect(await designations(page)).toHaveLength(5)
    expect(await page.getByRole('heading', { name: '5 entries of 120' }).isVisible()).toBe(true)
    await page.getByLabel('B', { exact: true }).check()
    await page.getByRole('button', { name: 'Show' }).click()
    expect((await designations(page)).length).toBeLessThan(3)
    await page.getByRole('link', { name: 'Clear' }).click()
    expect(await designations(page)).toHaveLength(50)
  })

  it('says what it cannot read and shows the rest', async () => {
    const page = await open(`${release(2)}?near=somewhere&sort=beauty&page=999`)
    const problems = await page.getByRole('alert').allTextContents()
    expect(problems.join(' ')).toMatch(/'somewhere' cannot be read.*|cannot be sorted by 'beauty'/)
    expect(problems.join(' ')).toContain('There is no page 999: this is the last.')
    expect(await designations(page)).toHaveLength(ENTRIES - 100)
  })

  it('leads to entries with addresses that stay, their pictures, and the ones beside', async () => {
    const page = await open(release(2))
    await page.getByRole('table').getByRole('link', { name: 'SWS J7', exact: true }).click()
    expect(new URL(page.url()).pathname).toBe(`${release(2)}/SWS-7`)
    expect(await page.getByRole('heading', { level: 1 }).textContent()).toBe('SWS J7')
    expect(await page.getByText('Four of four graders are sure.').isVisible()).toBe(true)
    const shown = await page
      .getByRole('img', { name: 'SWS J7, Colour' })
      .evaluate((image) => (image as HTMLImageElement).src)
    expect(shown).toContain(picture)
    await page.getByRole('link', { name: 'SWS J8' }).click()
    expect(new URL(page.url()).pathname).toBe(`${release(2)}/SWS-8`)
  })

  it('has links and a description that machines read', async () => {
    const page = await open(release(2))
    expect(await page.locator('link[rel=cite-as]').getAttribute('href')).toBe(`${server.url}${release(2)}`)
    expect(await page.locator('link[rel=license]').first().getAttribute('href')).toContain('creativecommons.org')
    const dataset = JSON.parse((await page.locator('script[type="application/ld+json"]').textContent()) ?? '') as {
      '@type': string
      distribution: { name: string; sha256?: string }[]
    }
    expect(dataset['@type']).toBe('Dataset')
    expect(dataset.distribution.map(({ name }) => name)).toContain('Simple Cone Search 1.03')
    expect(dataset.distribution[0].sha256).toMatch(/^[0-9a-f]{64}$/)
  })
})

describe('a release that is withdrawn', () => {
  it('says so on its page and on the pages of its entries, and what stands', async () => {
    for (const path of [release(1), `${release(1)}/SWS-1`]) {
      const page = await open(path)
      expect(await page.getByText('This release is withdrawn.').isVisible()).toBe(true)
      expect(await page.getByText('Wrong positions.').isVisible()).toBe(true)
      expect(await page.getByRole('link', { name: 'release 2' }).first().getAttribute('href')).toBe(release(2))
      await context?.close()
    }
  })

  it('is passed over by the address of the newest, and stays in the list', async () => {
    const page = await open(release('newest'))
    expect(new URL(page.url()).pathname).toBe(release(2))
    await page.goto(`${server.url}/r/${SLUG}`)
    expect(await page.getByText('withdrawn by release 4').isVisible()).toBe(true)
    expect(await page.getByRole('link', { name: 'Open release 2' }).isVisible()).toBe(true)
  })
})

describe('a release that is not public', () => {
  it.each([
    ['private', release(5)],
    ['by link, without it', release(3)],
    ['by link, with another secret', `${release(3)}?key=wrong`],
    ['unknown', release(77)],
    ['of an unknown campaign', '/r/nowhere/1'],
    ['with an entry that is none', `${release(2)}/SWS-999`],
    ['an entry of a private one', `${release(5)}/SWS-1`],
  ])('answers as if it were nowhere: %s', async (_, path) => {
    const answer = await fetch(`${server.url}${path}`)
    expect(answer.status).toBe(404)
    expect(await answer.text()).toContain('No release here that you may read')
  })

  it('is read by its link, which goes along in every link and tells nobody else', async () => {
    const address = `${release(3)}?key=${TOKEN}`
    const { headers } = await fetch(`${server.url}${address}`)
    expect(headers.get('referrer-policy')).toBe('no-referrer')
    expect(headers.get('x-robots-tag')).toBe('noindex, nofollow')
    const page = await open(address)
    expect(await page.locator('meta[name=robots]').getAttribute('content')).toContain('noindex')
    await page.getByRole('table').getByRole('link', { name: 'SWS J2', exact: true }).click()
    expect(await page.getByRole('heading', { level: 1 }).textContent()).toBe('SWS J2')
    expect(page.url()).toContain(`key=${TOKEN}`)
    const shown = page.getByRole('img', { name: 'SWS J2, Colour' })
    expect(await shown.evaluate((image) => (image as HTMLImageElement).naturalWidth)).toBe(1)
    await page.getByRole('link', { name: /Release 3/ }).click()
    await page.getByRole('button', { name: 'Show' }).click()
    expect(await designations(page)).toHaveLength(3)
  })
})

describe('the pages, with script', () => {
  it.each([
    ['all', '/r'],
    ['of a campaign', `/r/${SLUG}`],
    ['of a release', release(2)],
    ['of a withdrawn one', release(1)],
    ['of an entry', `${release(2)}/SWS-3`],
    ['of a retraction', release(4)],
  ])('%s are clean to axe and fit a phone', async (_, path) => {
    const page = await open(path, { script: true, viewport: PHONE })
    const errors = collectErrors(page)
    await page.waitForLoadState('networkidle')
    await expectAccessible(page)
    expect(await page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth)).toBeLessThanOrEqual(0)
    expect(errors).toEqual([])
  })
})
