// The tables of candidates and of the catalogue: filters by keys, a region across RA 0, columns in an order, views that are shared, and
// what a grader is not told. With RINGSIDE_PICTURES=folder each state is kept as a picture.
import type { Browser, Page } from 'playwright-core'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { candidateNumber } from '@/lib/work/campaigns/candidate-number'
import { SLUG } from '@/tests/_support/survey-site'
import { launchBrowser } from './_browser'
import type { GradingRoom } from './_grading-room'
import { lookAt } from './_look-at'
import { removeDataFolder } from './_server'
import { NAMES, openTables } from './_tables-site'

const HOME = `/campaigns/${SLUG}`
let room: GradingRoom
let browser: Browser

beforeAll(async () => {
  room = await openTables()
  browser = await launchBrowser()
}, 240_000)
afterAll(async () => {
  await browser?.close()
  await room?.db.destroy()
  await room?.server.stop()
  if (room) await removeDataFolder(room.server.dataFolder)
})

const open = (page: Page, query: string, table = 'candidates') =>
  page.goto(`${room.server.url}${HOME}/${table}${query}`, { waitUntil: 'networkidle' })
const rowsOf = (page: Page) => page.locator('tbody th[scope=row] a').allTextContents()
const expectRows = (page: Page, names: string[]) => expect.poll(() => rowsOf(page), { timeout: 10_000 }).toEqual(names)
const headsOf = async (page: Page) => (await page.locator('thead th').allTextContents()).map((text) => text.trim())
const asked = (page: Page, key: string) => new URL(page.url()).searchParams.get(key)
const expectAsked = (page: Page, key: string, value: string | null) =>
  expect.poll(() => asked(page, key), { timeout: 10_000 }).toBe(value)
const filtersButton = (page: Page) => page.getByRole('button', { name: /^Filters/ })
const field = (page: Page, name: string) => page.getByLabel(name, { exact: true })
const openFilters = async (page: Page) => {
  await filtersButton(page).click()
  await page.getByRole('region', { name: 'Filters' }).waitFor()
}
/** What is said of the field that has the focus. */
const problemBeside = (page: Page) =>
  page.evaluate(() => {
    const focused = document.activeElement
    const id = focused?.getAttribute('aria-invalid') === 'true' ? focused.getAttribute('aria-describedby') : null
    return id ? document.getElementById(id)?.textContent : null
  })

it('is filtered by keys alone, says beside the field what it cannot read, and keeps each step in the address', async () => {
  const { page, context, errors } = await room.enter(browser, 'avocet')
  await open(page, '')
  await expectRows(page, NAMES)
  await filtersButton(page).focus()
  await page.keyboard.press('Enter')
  await page.keyboard.press('Tab')
  await page.keyboard.press('Tab')
  await page.keyboard.type('0000')
  await page.keyboard.press('Enter')
  await expectAsked(page, 'name', '0000')
  await page.keyboard.press('Control+A')
  await page.keyboard.type(`${NAMES[1]}, SWS`)
  await expectRows(page, [NAMES[1]])
  await page.keyboard.press('Control+A')
  await page.keyboard.press('Delete')
  await expectRows(page, NAMES)

  await page.getByRole('button', { name: 'confirmed', exact: true }).focus()
  await page.keyboard.press('Space')
  await expectRows(page, [NAMES[1], NAMES[2], NAMES[4]])
  await field(page, 'Mean, points').focus()
  await page.keyboard.type('about 2')
  await page.keyboard.press('Enter')
  await expect
    .poll(() => problemBeside(page))
    .toBe('“about 2” is no range of numbers. Write >= 2, < 0.5, 1..3, 2.5, none or any.')
  await expectAsked(page, 'mean', 'about 2')
  expect(await rowsOf(page)).toEqual([NAMES[1], NAMES[2], NAMES[4]])
  await page.getByRole('button', { name: 'Take off the filter Mean about 2, which cannot be read' }).waitFor()

  await field(page, 'Grades given').focus()
  await page.keyboard.type('3..1')
  await page.keyboard.press('Enter')
  await expect.poll(() => problemBeside(page)).toBe('3..1 runs from the larger number to the smaller: write 1..3.')
  await page.keyboard.press('Control+A')
  await page.keyboard.type('>= 3')
  await page.keyboard.press('Enter')
  await expectRows(page, [NAMES[1], NAMES[2]])
  expect(await problemBeside(page)).toBeNull()
  await page.getByRole('status').getByText('2 of 6 candidates').waitFor()

  const address = page.url()
  await page.goBack()
  await expectAsked(page, 'votes', null)
  await expectRows(page, [NAMES[1], NAMES[2], NAMES[4]])
  await page.goBack()
  await expectAsked(page, 'mean', null)
  await expect.poll(() => field(page, 'Mean, points').inputValue()).toBe('')
  await page.goForward()
  await page.goForward()
  await expect.poll(() => page.url()).toBe(address)
  await expectRows(page, [NAMES[1], NAMES[2]])
  await expect.poll(() => field(page, 'Grades given').inputValue()).toBe('>= 3')

  await field(page, 'Grades given').focus()
  await page.keyboard.press('Escape')
  await page.getByRole('region', { name: 'Filters' }).waitFor({ state: 'detached' })
  expect(await page.evaluate(() => document.activeElement?.textContent)).toBe('Filters (3)')

  const other = await context.newPage()
  await other.goto(address, { waitUntil: 'networkidle' })
  await expectRows(other, [NAMES[1], NAMES[2]])
  await other.getByRole('button', { name: 'Clear filters' }).click()
  await expectRows(other, NAMES)
  expect(errors).toEqual([])
  await context.close()
})

it('finds a region of the sky across RA 0, and says which of its fields is missing or beyond the sky', async () => {
  const { page, context, errors } = await room.enter(browser, 'avocet')
  await open(page, '')
  await openFilters(page)
  await field(page, 'Within').focus()
  await page.keyboard.type('5 arcsec')
  await page.keyboard.press('Enter')
  await page.getByText('Say round which position: 150.1 2.2, or 10:00:24 +02:12:00.').waitFor()
  expect(await rowsOf(page)).toEqual(NAMES)
  await field(page, 'Round the position, ICRS').focus()
  await page.keyboard.type('0 95')
  await page.keyboard.press('Enter')
  await expect.poll(() => problemBeside(page)).toMatch(/95/)
  expect(await rowsOf(page)).toEqual(NAMES)
  await page.keyboard.press('Control+A')
  await page.keyboard.type('00:00:00 +05:00:00')
  await page.keyboard.press('Enter')
  await expectRows(page, [NAMES[1], NAMES[2]])
  await page.getByRole('img', { name: /^Sky plot: 2 rows of this page, within 5 arcsec of / }).waitFor()
  // 3.586 arcsec away each: 0.001 deg times cos 5 deg.
  await field(page, 'Within').fill('3 arcsec')
  await expectRows(page, [])
  await page.getByText('Nothing passes these filters. Loosen one, or clear them all.').waitFor()
  await page.getByRole('button', { name: 'Clear filters' }).click()

  await field(page, 'RA from..to').fill('359.9..0.1')
  await expectRows(page, [NAMES[1], NAMES[2]])
  await field(page, 'RA from..to').fill('0.1..359.9')
  await expectRows(page, [NAMES[0], NAMES[3], NAMES[4], NAMES[5]])
  await field(page, 'Dec from..to').fill('12..-12')
  await page.getByText('12..-12 runs from north to south: write the southern end first.').waitFor()
  await field(page, 'Dec from..to').fill('< 0')
  await expectRows(page, [NAMES[5]])
  expect(errors).toEqual([])
  await context.close()
})

it('sorts by heads and puts columns in an order by keys, and the address brings both back', async () => {
  const { page, context, errors } = await room.enter(browser, 'avocet')
  await open(page, '?state=confirmed')
  await page.getByRole('button', { name: 'RA', exact: true }).focus()
  await page.keyboard.press('Enter')
  await expectRows(page, [NAMES[2], NAMES[4], NAMES[1]])
  await page.keyboard.press('Enter')
  await expectRows(page, [NAMES[1], NAMES[4], NAMES[2]])
  await page.getByRole('button', { name: 'Columns' }).focus()
  await page.keyboard.press('Enter')
  await page.getByLabel('Tags').focus()
  await page.keyboard.press('Space')
  for (let step = 0; step < 9; step++) {
    await page.getByRole('button', { name: 'Move Tags before the column before it' }).focus()
    await page.keyboard.press('Enter')
  }
  await expect.poll(() => headsOf(page)).toEqual(expect.arrayContaining(['Tags']))
  await expect.poll(async () => (await headsOf(page)).slice(0, 3)).toEqual(['Candidate', 'Tags', 'State'])
  await page.keyboard.press('Escape')
  await expect.poll(() => asked(page, 'columns')).toMatch(/^tags,state,/)
  const other = await context.newPage()
  await other.goto(page.url(), { waitUntil: 'networkidle' })
  expect((await headsOf(other)).slice(0, 3)).toEqual(['Candidate', 'Tags', 'State'])
  expect(await rowsOf(other)).toEqual([NAMES[1], NAMES[4], NAMES[2]])
  await other.getByRole('button', { name: 'Columns' }).click()
  await other.getByRole('button', { name: 'As the table comes' }).click()
  await expect.poll(async () => (await headsOf(other)).includes('Tags')).toBe(false)
  expect(errors).toEqual([])
  await context.close()
})

it('shares a saved view of a lead with a viewer, who can neither change it nor share their own', async () => {
  const lead = await room.enter(browser, 'avocet')
  const views = (page: Page) => page.getByRole('button', { name: /^View/ })
  const nameField = (page: Page) => page.getByLabel('Save the table as it is now under the name')
  await open(lead.page, '?state=confirmed&sort=-ra')
  await views(lead.page).click()
  await lead.page.getByRole('button', { name: 'Save view' }).click()
  await lead.page.getByText('Give the view a name.').waitFor()
  await nameField(lead.page).fill('Confirmed, from the east')
  await lead.page.getByLabel('Share it with the campaign').check()
  await lead.page.keyboard.press('Enter')
  await lead.page.keyboard.press('Tab')
  await lead.page.getByText('Saved: Confirmed, from the east.').waitFor()
  await nameField(lead.page).fill('confirmed, FROM the east')
  await nameField(lead.page).press('Enter')
  await lead.page.getByText(/You have a view called “Confirmed, from the east” already/).waitFor()
  expect(await nameField(lead.page).inputValue()).toBe('confirmed, FROM the east')
  await nameField(lead.page).fill('Only mine')
  await nameField(lead.page).press('Enter')
  await lead.page.getByText('Saved: Only mine.').waitFor()

  const reader = await room.enter(browser, 'egret')
  await open(reader.page, '')
  await views(reader.page).click()
  const shown = reader.page.getByRole('dialog', { name: 'Saved views' })
  await shown.getByText('Shared by leads').waitFor()
  expect(await shown.getByRole('link').allTextContents()).toEqual(['Confirmed, from the east'])
  expect(await shown.getByRole('button', { name: /^Change the view/ }).count()).toBe(0)
  expect(await shown.getByLabel('Share it with the campaign').count()).toBe(0)
  // As a page that was tampered with would send it.
  await nameField(reader.page).fill('For everybody')
  await nameField(reader.page).evaluate((input) => {
    const shared = Object.assign(document.createElement('input'), { type: 'hidden', name: 'shared', value: 'on' })
    input.closest('form')?.append(shared)
  })
  await nameField(reader.page).press('Enter')
  await shown.getByText('Only a lead of this campaign shares views. Save it for yourself.').waitFor()
  await shown.getByRole('link', { name: 'Confirmed, from the east' }).click()
  await expectRows(reader.page, [NAMES[1], NAMES[4], NAMES[2]])
  await expectAsked(reader.page, 'sort', '-ra')

  await lead.page.getByRole('button', { name: 'Change the view Confirmed, from the east' }).click()
  await lead.page.getByRole('button', { name: 'Delete this view' }).click()
  await lead.page.getByRole('link', { name: 'Confirmed, from the east' }).waitFor({ state: 'detached' })
  await open(reader.page, '')
  await views(reader.page).click()
  await reader.page.getByText('A view keeps filters, order and columns under a name.').waitFor()
  expect([...lead.errors, ...reader.errors]).toEqual([])
  await lead.context.close()
  await reader.context.close()
})

it('tells a grader nothing of what they have not judged, by no filter, order or count', async () => {
  const { page, context, errors } = await room.enter(browser, 'curlew')
  const candidates = await room.db.selectFrom('candidate').select(['id', 'name']).orderBy('id').execute()
  const [one, two, three] = [NAMES[1], NAMES[2], NAMES[3]]
  /** The stamp, one that others have confirmed and one that is open, by number and as they arrived. */
  const others = candidates.filter(({ name }) => ![one, two, three].includes(name))
  const numbers = others.map(({ id }) => candidateNumber(id))
  await open(page, '')
  await expectRows(page, [one, two, three, ...numbers])
  expect(await page.getByText('after your grade', { exact: true }).count()).toBe(3)
  for (const [query, found] of [
    ['?state=confirmed', [one, two]],
    ['?mean=%3E%3D+2', [one, two]],
    ['?votes=2', []],
    ['?remark=knot', []],
    ['?designation=J0520', []],
    [`?name=${NAMES[4]}`, []],
    ['?decided=verdict', [one, two, three]],
    ['?entered=any', [one, two]],
    ['?state=not+graded+by+me', numbers],
    // What is for leads is passed over: the order is that of names.
    ['?score=%3E%3D+0.99&calibration=calibration&zlens=any', [one, two, three, ...numbers]],
  ] as [string, string[]][]) {
    await open(page, query)
    expect(await rowsOf(page), query).toEqual(found)
    expect(await page.getByText('A knot north of the arc').count(), query).toBe(0)
  }
  for (const [sort, arrival] of [
    ['mean', numbers],
    ['-mean', numbers.toReversed()],
  ] as [string, string[]][]) {
    await open(page, `?sort=${sort}`)
    const rows = await rowsOf(page)
    expect(rows.slice(0, 3).toSorted(), sort).toEqual([one, two, three])
    expect(rows.slice(3), sort).toEqual(arrival)
  }
  await open(page, '', 'catalogue')
  await page.getByRole('heading', { name: '2 confirmed candidates that you have graded' }).waitFor()
  expect(errors).toEqual([])
  await context.close()

  const lead = await room.enter(browser, 'avocet')
  await open(lead.page, '?remark=knot')
  expect(await rowsOf(lead.page)).toEqual([NAMES[4]])
  await open(lead.page, '?calibration=calibration')
  expect(await rowsOf(lead.page)).toEqual([NAMES[0]])
  await open(lead.page, '', 'catalogue')
  await lead.page.getByRole('heading', { name: '3 confirmed candidates' }).waitFor()
  await lead.context.close()
})

it('looks right in each state on a desk, in half a window and on a phone', async () => {
  const { page, context, errors } = await room.enter(browser, 'avocet')
  await open(page, '?state=confirmed,split&mean=about+2&near=0+5&dec=5..1')
  await openFilters(page)
  await lookAt(page, 'tables-filters-bad')
  await open(page, '?near=0+5&within=5+arcsec&columns=state,known,einstein,tags,remark,ra,dec,zlens,entered')
  await openFilters(page)
  await lookAt(page, 'tables-region')
  await filtersButton(page).click()
  await page.getByRole('button', { name: 'Columns' }).click()
  await lookAt(page, 'tables-columns')
  await page.keyboard.press('Escape')
  await page.getByRole('button', { name: /^View/ }).click()
  await lookAt(page, 'tables-views')
  await open(page, '?class=A', 'catalogue')
  await openFilters(page)
  await lookAt(page, 'tables-catalogue')
  expect(errors).toEqual([])
  await context.close()
})
