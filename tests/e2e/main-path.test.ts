// The whole job as its people do it, on the real server in real browsers: from the first visit to a catalogue on disk.
import { readFile } from 'node:fs/promises'
import Papa from 'papaparse'
import type { Browser, BrowserContext, Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { candidateNumber } from '@/lib/work/campaigns/candidate-number'
import { collectErrors, expectAccessible, launchBrowser } from './_browser'
import { deliveries } from './_deliveries'
import { makeDataFolder, removeDataFolder, startTestServer, type TestServer } from './_server'

const PASSWORD = 'mud between the toes'
const LEAD = 'avocet@saltmarsh.test'
const GRADERS = ['curlew', 'dunlin', 'plover']
const REMARK = '=1+1, "quoted" <b>&amp; after a comma'
const HOME = '/campaigns/marsh-test'
const delivered = deliveries()

let server: TestServer
let browser: Browser
let lead: Page
const graderPages: Page[] = []
const contexts: BrowserContext[] = []
const errors: string[][] = []

async function newPage(): Promise<Page> {
  const context = await browser.newContext({ viewport: { width: 1440, height: 900 }, colorScheme: 'dark' })
  contexts.push(context)
  const page = await context.newPage()
  page.setDefaultTimeout(30_000)
  errors.push(collectErrors(page))
  return page
}

/** The first four are lenses to all, the next two to two of three, the rest to nobody. */
function letterFor(name: string, grader: number): string {
  const index = delivered.names.indexOf(name)
  if (index < 4) return 'A'
  if (index < 6) return grader === 1 ? 'N' : 'A'
  return 'N'
}

/** The bench hears a grade once a picture is there, and not in the moment after a change, when a key was meant for the last. */
async function untilGradable(page: Page): Promise<void> {
  await page.waitForFunction(() => [...document.images].some((image) => image.complete && image.naturalWidth > 0))
  await page.waitForTimeout(250)
}

beforeAll(async () => {
  server = await startTestServer(await makeDataFolder())
  browser = await launchBrowser()
  lead = await newPage()
})

afterAll(async () => {
  await browser?.close()
  await server?.stop()
  if (server) await removeDataFolder(server.dataFolder)
})

describe('the main path', () => {
  it('offers a first visitor to make the administrator with the code that the server printed', async () => {
    await lead.goto(server.url)
    await lead.waitForURL('**/welcome')
    // The first request of a cold server: what is typed before the page's script runs may be lost.
    await lead.waitForLoadState('networkidle')
    await expectAccessible(lead)
    await lead.getByLabel('One-time code').fill('WRONG-CODE')
    await lead.getByLabel('Your name').fill('avocet')
    await lead.getByLabel('E-mail').fill(LEAD)
    await lead.getByLabel('Password', { exact: true }).fill(PASSWORD)
    await lead.keyboard.press('Enter')
    // The refusal stands at the field; the frame of the pages has a live region of its own, so no 'alert' is waited for.
    await expect
      .poll(() => lead.getByLabel('One-time code').getAttribute('aria-invalid'), { timeout: 15_000 })
      .toBe('true')
    const code = /one-time code (\S+)/.exec(server.output())?.[1]
    expect(code, server.output()).toBeDefined()
    await lead.getByLabel('One-time code').fill(code!)
    await lead.getByLabel('Password', { exact: true }).fill(PASSWORD)
    await lead.getByRole('button', { name: 'Make the administrator' }).click()
    await lead.waitForURL((address) => address.pathname === '/')
  })

  it('lets the lead create a campaign by form, and keeps what was typed when something is wrong', async () => {
    await lead.goto(`${server.url}/campaigns/new`, { waitUntil: 'networkidle' })
    await lead.getByLabel('Name of the campaign').fill('Marsh test')
    await lead.getByLabel('Survey').fill('Saltmarsh Wide Survey')
    await lead.getByLabel('Acronym').fill('sws')
    await lead.getByLabel('Bands').fill('g, r, i')
    await lead.getByLabel('Grades wanted').fill('3')
    await lead.getByLabel('Least grades').fill('3')
    await lead.getByRole('button', { name: 'Create the campaign' }).click()
    await expect.poll(() => lead.getByLabel('Acronym').getAttribute('aria-invalid')).toBe('true')
    expect(await lead.getByLabel('Name of the campaign').inputValue()).toBe('Marsh test')
    await lead.getByLabel('Acronym').fill('SWS')
    await lead.getByRole('button', { name: 'Create the campaign' }).click()
    await lead.waitForURL(`**${HOME}**`)
  })

  it('invites three graders by e-mail, who set their passwords from the letters in the outbox', async () => {
    // What is sent before the page's script runs may be lost on a busy machine.
    await lead.goto(`${server.url}${HOME}/people`, { waitUntil: 'networkidle' })
    await lead.getByLabel('E-mail addresses').fill(GRADERS.map((name) => `${name}@saltmarsh.test`).join('\n'))
    await lead.getByRole('button', { name: 'Invite', exact: true }).click()
    await expect.poll(() => lead.getByText('curlew@saltmarsh.test').count()).toBeGreaterThan(0)
    await lead.goto(`${server.url}/admin/outbox`)
    for (const name of GRADERS) {
      const letter = lead.getByRole('listitem').filter({ hasText: `${name}@saltmarsh.test` })
      const link = await letter.locator('a[href*="/invitation/"]').first().getAttribute('href')
      const page = await newPage()
      await page.goto(link!, { waitUntil: 'networkidle' })
      await page.getByLabel('Your name').fill(name)
      await page.getByLabel('Password', { exact: true }).fill(PASSWORD)
      await page.getByRole('button', { name: 'Join the campaign' }).click()
      await page.waitForURL(`**${HOME}**`)
      graderPages.push(page)
    }
  })

  it('takes 37 files, refuses the damaged one in words, knows the duplicate, and images the rest', async () => {
    await lead.goto(`${server.url}${HOME}/intake`)
    await lead.getByLabel('Files to send').setInputFiles(delivered.files)
    await lead.getByRole('heading', { name: /^37 files for/ }).waitFor()
    await expectAccessible(lead)
    await lead.getByRole('button', { name: 'Take them in' }).click()
    const files = async () => {
      const answer = await lead.request.get(`${server.url}/api/campaigns/marsh-test/files`)
      return (await answer.json()) as { files: { name: string; fate: string; reason: string | null }[] }
    }
    const done = async () => (await files()).files.filter(({ fate }) => !['stored', 'read'].includes(fate)).length
    await expect.poll(done, { timeout: 90_000, interval: 500 }).toBe(37)
    const { files: data } = await files()
    const fateOf = (name: string) => data.find((file) => file.name === name)
    expect(fateOf(delivered.damaged)).toMatchObject({ fate: 'refused' })
    expect(fateOf(delivered.damaged)?.reason).toMatch(/bytes/)
    expect(fateOf(delivered.duplicate)).toMatchObject({ fate: 'duplicate' })
    expect(data.filter(({ fate }) => fate === 'imaged')).toHaveLength(35)
    await expect.poll(() => lead.getByText(delivered.damaged).count(), { timeout: 20_000 }).toBeGreaterThan(0)
    await expectAccessible(lead)
  })

  it('sends nothing when the same files are chosen again', async () => {
    let sent = 0
    lead.on('request', (request) => void (sent += request.method() === 'PUT' ? 1 : 0))
    await lead.getByLabel('Files to send').setInputFiles(delivered.files)
    await lead.getByRole('button', { name: 'Take them in' }).click()
    await lead.getByText('37 files sent, 37 of them here before.').waitFor()
    expect(sent).toBe(0)
  })

  it('lets three graders grade everything by keyboard at the same time, each candidate three times in all', async () => {
    const listed = await lead.request.get(`${server.url}/api/campaigns/marsh-test/candidates`)
    const { candidates } = (await listed.json()) as { candidates: { id: number; name: string }[] }
    const nameOf = new Map(candidates.map(({ id, name }) => [candidateNumber(id), name]))
    const gradeAll = async (page: Page, grader: number) => {
      // Keys are heard once the page's script runs.
      await page.goto(`${server.url}${HOME}/bench`, { waitUntil: 'networkidle' })
      const seen: string[] = []
      for (let n = 0; n < delivered.names.length; n++) {
        const heading = page.locator('h1')
        await expect.poll(() => heading.textContent(), { timeout: 20_000 }).toMatch(/^No\. \d+$/)
        const number = (await heading.textContent())!
        const name = nameOf.get(number)!
        seen.push(name)
        await untilGradable(page)
        if (grader === 0 && name === delivered.names[0]) {
          await page.keyboard.press('m')
          await page.keyboard.type(REMARK)
          await page.keyboard.press('Enter')
          // For half a second letters after a remark are taken for words that came late.
          await page.waitForTimeout(700)
        }
        await page.keyboard.press(letterFor(name, grader).toLowerCase())
        await expect.poll(() => heading.textContent(), { timeout: 20_000 }).not.toBe(number)
      }
      await expect.poll(() => page.getByText('All grades saved').count(), { timeout: 20_000 }).toBeGreaterThan(0)
      return seen
    }
    const seen = await Promise.all(graderPages.map(gradeAll))
    for (const names of seen) expect([...names].sort()).toEqual([...delivered.names].sort())
    await expectAccessible(graderPages[0])
  })

  it('computes the consensus by button, and the lead settles a split by keyboard with a reason', async () => {
    await lead.goto(`${server.url}${HOME}/splits`)
    await lead.getByRole('button', { name: 'Run consensus now' }).click()
    await expect.poll(() => lead.getByRole('heading', { level: 1 }).textContent(), { timeout: 20_000 }).toBe('2 splits')
    await expectAccessible(lead)
    await lead.keyboard.press('b')
    await lead.keyboard.press('r')
    await lead.keyboard.press('Control+Enter')
    await expect.poll(() => lead.getByText('Give a reason').count()).toBeGreaterThan(0)
    await lead.keyboard.type('The counter-image is where it should be.')
    await lead.keyboard.press('Control+Enter')
    await expect.poll(() => lead.getByRole('heading', { level: 1 }).textContent(), { timeout: 20_000 }).toBe('1 split')
  })

  it('gives the catalogue as a table, as CSV and as VOTable, with every value as it was typed', async () => {
    await lead.goto(`${server.url}${HOME}/catalogue`)
    await expect.poll(() => lead.getByRole('heading', { level: 1 }).textContent()).toBe('5 confirmed candidates')
    const save = async (name: string) => {
      const [download] = await Promise.all([lead.waitForEvent('download'), lead.getByRole('link', { name }).click()])
      return readFile(await download.path(), 'utf8')
    }
    const { data } = Papa.parse<Record<string, string>>(await save('Download CSV'), {
      header: true,
      skipEmptyLines: true,
    })
    expect(data).toHaveLength(5)
    const first = data.find(({ name }) => name === delivered.names[0])
    expect(first?.designation).toMatch(/^SWS J\d{6}\.\d{2}[+-]\d{6}\.\d$/)
    expect(first?.remarks).toContain(REMARK)
    const votable = await save('Download VOTable')
    expect(votable).toContain('<VOTABLE version="1.4"')
    expect(votable.match(/<TR>/g)).toHaveLength(5)
    expect(votable).toContain('&lt;b&gt;&amp;amp;')
  })

  it('shows nobody the grades of others first, and nothing to strangers', async () => {
    const answer = await graderPages[0].request.get(`${server.url}/api/campaigns/marsh-test/catalogue.csv`)
    expect(answer.status()).toBe(403)
    const counts = await graderPages[0].request.get(`${server.url}/api/campaigns/marsh-test/counts`)
    expect(counts.status()).toBe(403)
    const stranger = await newPage()
    for (const path of [
      '',
      '/counts',
      '/waiting',
      '/files',
      '/candidates',
      '/queue',
      '/catalogue.csv',
      '/catalogue.vot',
    ]) {
      const refused = await stranger.request.get(`${server.url}/api/campaigns/marsh-test${path}`)
      expect([401, 404], path).toContain(refused.status())
    }
    await stranger.goto(`${server.url}${HOME}/catalogue?sort=name`)
    expect(new URL(stranger.url()).pathname).toBe('/signin')
    await stranger.getByLabel('E-mail').fill('plover@saltmarsh.test')
    await stranger.getByLabel('Password', { exact: true }).fill(PASSWORD)
    await stranger.keyboard.press('Enter')
    await stranger.waitForURL(`**${HOME}/catalogue?sort=name`)
  })

  it('is accessible on every page, at night on a desk and by day on a phone, and throws nothing', async () => {
    const PAGES = [
      '',
      '/intake',
      '/candidates',
      '/candidates/1',
      '/splits',
      '/splits?sort=spread',
      '/mentions',
      '/catalogue',
      '/people',
      '/settings',
      '/bench',
    ]
    const paths = [
      ...PAGES.map((path) => HOME + path),
      '/',
      '/campaigns/new',
      '/account',
      '/admin/outbox',
      '/admin/accounts',
    ]
    const SETTINGS = [
      { colorScheme: 'dark', width: 1440, height: 900 },
      { colorScheme: 'light', width: 390, height: 844 },
    ] as const
    for (const { colorScheme, ...size } of SETTINGS) {
      await lead.emulateMedia({ colorScheme })
      await lead.setViewportSize(size)
      for (const path of paths) {
        await lead.goto(server.url + path)
        await lead.waitForLoadState('networkidle')
        await expectAccessible(lead)
        const overflow = await lead.evaluate(() => document.documentElement.scrollWidth - window.innerWidth)
        expect(overflow, `${path} is wider than the window of ${size.width}`).toBeLessThanOrEqual(0)
      }
    }
    // Refused files, a wrong code and a refused export are answers, not errors of the pages.
    expect(errors.flat().filter((line) => !line.includes('Failed to load resource'))).toEqual([])
  })
})
