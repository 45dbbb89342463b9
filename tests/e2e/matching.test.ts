// Known objects and duplicates: a list with swapped columns is refused in words, mended and labels; a merge is made and parted by keys.
import type { Browser, Page } from 'playwright-core'
import { afterAll, beforeAll, expect, it, vi } from 'vitest'
import { signInCookie, SLUG } from '@/tests/_support/survey-site'
import { signIn, startBenchSite } from './_bench-site'
import { collectErrors, expectAccessible, launchBrowser } from './_browser'
import { removeDataFolder, type TestServer } from './_server'

const HOME = `/campaigns/${SLUG}`
const CANDIDATES = 4

let server: TestServer
let browser: Browser
let names: string[]

/** The first two of them half an arcsecond apart, across RA 0, as a manifest tells. */
const PLACES = [
  [359.99995, 5],
  [0.00009, 5],
  [40, 12],
  [80, 12],
]

beforeAll(async () => {
  server = await startBenchSite(CANDIDATES)
  browser = await launchBrowser()
  const cookie = await signInCookie(server.url)
  const api = `${server.url}/api/campaigns/${SLUG}`
  const answer = await fetch(`${api}/candidates`, { headers: { cookie } })
  const { candidates } = (await answer.json()) as { candidates: { name: string }[] }
  names = candidates.map(({ name }) => name).sort()
  const lines = names.map((name, place) => `${name},${PLACES[place].join(',')}`)
  const manifest = `candidate,ra,dec\n${lines.join('\n')}\n`
  const sent = await fetch(`${api}/files/places.csv`, { method: 'PUT', headers: { cookie }, body: manifest })
  expect(sent.status).toBe(201)
}, 180_000)
afterAll(async () => {
  await browser?.close()
  await server?.stop()
  if (server) await removeDataFolder(server.dataFolder)
})

const asFile = (text: string) => ({ name: 'marsh-lenses.csv', mimeType: 'text/csv', buffer: Buffer.from(text) })
const widthOf = (page: Page) => page.evaluate(() => document.documentElement.scrollWidth)

it('refuses a list with swapped columns in words, keeps it, and labels what it knows once they are mended', async () => {
  const context = await browser.newContext({ viewport: { width: 1440, height: 900 } })
  await signIn(context, server.url)
  const page = await context.newPage()
  const errors = collectErrors(page)
  await page.goto(`${server.url}${HOME}/known`, { waitUntil: 'networkidle' })
  await page.getByRole('heading', { name: 'No list of known objects yet' }).waitFor()
  await expectAccessible(page)

  await page.getByLabel('List to send').setInputFiles(asFile('%PDF-1.4 no list'))
  await page.getByText(/marsh-lenses.csv: The file has only one column/).waitFor()

  // Under the header of each coordinate stands the other.
  const rows = Array.from({ length: 12 }, (_, k) => `Reed ${k},${150 + k},${k - 6}`)
  const list = `name,dec,ra\nOld ring,40.0001,12\n${rows.join('\n')}\n`
  await page.getByLabel('List to send').setInputFiles(asFile(list))
  await page.waitForURL(/\/known\/\d+$/)
  await page.getByText(/the two columns are probably swapped\. Swap them\./).waitFor()
  await expectAccessible(page)
  await page.getByRole('button', { name: 'Take it in' }).click()
  await page.getByText('Say where the list comes from: a paper, a survey, a service.').waitFor()
  await page.getByLabel('Source').fill('Heron 2019, table 2')
  await page.getByLabel('Date').fill('May 2019')
  await page.getByRole('button', { name: 'Take it in' }).click()
  await page.waitForURL(/\/known$/)
  await page.getByText('refused').first().waitFor({ timeout: 20_000 })

  await page.getByRole('link', { name: 'marsh-lenses' }).click()
  await page.getByText('The file and your choice are still here.').waitFor()
  expect(await page.getByLabel('Source').inputValue()).toBe('Heron 2019, table 2')
  await page.getByRole('button', { name: 'Swap the two' }).click()
  await page.getByText('All 13 rows were looked at.').waitFor()
  await page
    .getByText(/probably swapped\. Swap them/)
    .nth(1)
    .waitFor({ state: 'detached' })
  await page.getByLabel('Name', { exact: true }).fill('Marsh lenses')
  await page.getByRole('button', { name: 'Take it in' }).click()
  await page.waitForURL(/\/known$/)
  await page.getByText('in force').first().waitFor({ timeout: 20_000 })
  await page.getByRole('heading', { name: '1 candidate is a known object' }).waitFor({ timeout: 20_000 })
  await expectAccessible(page)

  await page.goto(`${server.url}${HOME}/candidates`, { waitUntil: 'networkidle' })
  await page.getByText('known: Old ring').waitFor()
  await page.getByRole('link', { name: names[2] }).click()
  await page.getByText('Known here: 1 object').waitFor()
  await page.getByText(/Marsh lenses: Heron 2019, table 2, May 2019; its number 2/).waitFor()
  await page.getByRole('button', { name: 'Not Old ring: another object' }).click()
  await page.getByRole('form', { name: 'Whether it is Old ring' }).getByRole('textbox').fill('It is the neighbour.')
  await page.getByRole('button', { name: 'Take the label away' }).click()
  await page.getByText('a different object, no label').waitFor()
  await page.goto(`${server.url}${HOME}/candidates`, { waitUntil: 'networkidle' })
  expect(await page.getByText('known: Old ring').count()).toBe(0)
  expect(errors.filter((error) => !error.includes('422'))).toEqual([])
  await context.close()
})

it('merges by keys what lies at one place across RA 0, shows both histories, and parts it again', async () => {
  const context = await browser.newContext({ viewport: { width: 1440, height: 900 } })
  await signIn(context, server.url)
  const page = await context.newPage()
  const errors = collectErrors(page)
  await vi.waitFor(
    async () => {
      await page.goto(`${server.url}${HOME}/duplicates`, { waitUntil: 'networkidle' })
      expect(await page.locator('h1').textContent()).toBe('1 group that may be one object')
    },
    { timeout: 30_000, interval: 1000 },
  )
  await page.getByRole('heading', { name: '2 candidates within 0.50″' }).waitFor()
  await expectAccessible(page)
  await page.setViewportSize({ width: 390, height: 844 })
  expect(await widthOf(page), 'on a phone').toBe(390)
  await page.setViewportSize({ width: 1440, height: 900 })
  // Members stand in the order in which their files happened to arrive.
  const members = await page.getByRole('list', { name: 'Candidates of the group' }).getByRole('link').allTextContents()
  await page.keyboard.press(String(members.indexOf(names[1]) + 1))
  await page.getByRole('button', { name: `Merge into ${names[1]}` }).waitFor()
  await page.keyboard.press('m')
  await page.keyboard.press('Control+Enter')
  await page.getByText('Give a reason: it is kept with the decision').waitFor()
  await page.keyboard.type('Two tiles overlap here.')
  await page.keyboard.press('Control+Enter')
  await page.getByText(`${names[0]} is merged into ${names[1]}.`).waitFor()
  await page.getByRole('heading', { name: 'No candidate is proposed twice' }).waitFor()

  await page.goto(`${server.url}${HOME}/candidates`, { waitUntil: 'networkidle' })
  await page.getByRole('link', { name: names[1] }).click()
  await page.getByText(`What was made of ${names[0]}, which was merged into it`).click()
  await page.getByText(`“The same object as ${names[1]}: merged into it. Two tiles overlap here.”`).first().waitFor()
  await expectAccessible(page)
  await page.goto(`${server.url}${HOME}/candidates`, { waitUntil: 'networkidle' })
  await page.getByRole('link', { name: names[0] }).click()
  await page.getByText(`What was made of ${names[1]}, which it was merged into`).waitFor()
  expect(await page.getByRole('form', { name: 'Rule on this candidate' }).count()).toBe(0)

  await page.goto(`${server.url}${HOME}/duplicates`, { waitUntil: 'networkidle' })
  await page.getByRole('button', { name: `Part ${names[0]} from ${names[1]} again` }).click()
  await page.getByRole('form', { name: /^Part/ }).getByRole('textbox').fill('They are two after all.')
  await page.getByRole('button', { name: 'Part them', exact: true }).click()
  await page.getByText(`${names[0]} is parted from ${names[1]}: it is as it was before.`).waitFor()
  await page.getByRole('heading', { name: '2 candidates within 0.50″' }).waitFor()
  await page.keyboard.press('d')
  await page.keyboard.type('Two galaxies, both real.')
  await page.keyboard.press('Control+Enter')
  await page.getByText('stay different objects.').waitFor()
  await page.getByText('No candidate is proposed twice').waitFor()
  expect(errors).toEqual([])
  await context.close()
})

it('fits a phone', async () => {
  const context = await browser.newContext({ viewport: { width: 390, height: 844 }, hasTouch: true, isMobile: true })
  await signIn(context, server.url)
  const page = await context.newPage()
  for (const path of ['/known', '/duplicates']) {
    await page.goto(`${server.url}${HOME}${path}`, { waitUntil: 'networkidle' })
    expect(await widthOf(page), path).toBe(390)
    await expectAccessible(page)
  }
  await page.goto(`${server.url}${HOME}/known`, { waitUntil: 'networkidle' })
  await page.getByRole('link', { name: 'Marsh lenses' }).click()
  await page.getByRole('heading', { name: 'Marsh lenses' }).waitFor()
  expect(await widthOf(page)).toBe(390)
  await expectAccessible(page)
  await context.close()
})
