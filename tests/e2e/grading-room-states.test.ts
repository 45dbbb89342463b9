// Every state of the grading room on a desk, in half a window and on a phone, by night and by day. With RINGSIDE_PICTURES=folder each is
// kept as a picture.
import type { Browser, Page } from 'playwright-core'
import { afterAll, beforeAll, expect, it, vi } from 'vitest'
import { insertAskedLook } from '@/db/queries/asked-looks'
import { SLUG } from '@/tests/_support/survey-site'
import { BENCH, headingOf, untilGradable } from './_bench-site'
import { launchBrowser } from './_browser'
import { NEW_SLUG, openGradingRoom, setCampaign, type GradingRoom } from './_grading-room'
import { lookAt } from './_look-at'
import { removeDataFolder } from './_server'

const CANDIDATES = 44
const STAMPS = 8
const HOME = `/campaigns/${SLUG}`

let room: GradingRoom
let browser: Browser

beforeAll(async () => {
  room = await openGradingRoom(CANDIDATES, STAMPS)
  browser = await launchBrowser()
  await vi.waitFor(async () => expect(await countStamps()).toBe(STAMPS), { timeout: 30_000, interval: 300 })
}, 240_000)
afterAll(async () => {
  await browser?.close()
  await room?.db.destroy()
  await room?.server.stop()
  if (room) await removeDataFolder(room.server.dataFolder)
})

const countStamps = async () =>
  (await room.db.selectFrom('candidate').select('id').where('truth', 'is not', null).execute()).length
const open = (page: Page, address: string) => page.goto(room.server.url + address, { waitUntil: 'networkidle' })
const heading = (page: Page, name: string | RegExp) => page.getByRole('heading', { name }).first().waitFor()
/** Chromium logs what the network or a server under test refuses. */
const surprises = (errors: string[]) => errors.filter((error) => !/Failed to (load resource|fetch)/.test(error))

async function giveGrade(page: Page, letter: string): Promise<void> {
  await untilGradable(page)
  const before = await headingOf(page)
  await page.keyboard.press(letter)
  await expect.poll(() => headingOf(page)).not.toBe(before)
}

it('the sheet: a page, marks, a stamp large, the question, what waits without a network, the end, and who has none', async () => {
  await setCampaign(room, { uses_sheet: 1, calibration_share: 0.2 })
  const { page, context, errors } = await room.enter(browser, 'avocet')
  await open(page, `${HOME}/sheet`)
  await page
    .getByRole('button', { name: /send on$/ })
    .first()
    .waitFor()
  await lookAt(page, 'sheet-page')
  for (const key of ['s', 'ArrowRight', 'ArrowRight', 's']) await page.keyboard.press(key)
  await expect.poll(() => page.getByText('Sent on', { exact: true }).count()).toBe(2)
  await lookAt(page, 'sheet-marks')
  await page.keyboard.press('e')
  await page.getByRole('dialog').waitFor()
  await lookAt(page, 'sheet-large')
  await page.keyboard.press('Escape')
  await page.keyboard.press('n')
  await page.getByRole('group', { name: 'Confirm' }).waitFor()
  await lookAt(page, 'sheet-question')
  await page.keyboard.press('Escape')
  await context.setOffline(true)
  await page.keyboard.press('s')
  await page.getByText('The server cannot be reached.').waitFor()
  await lookAt(page, 'sheet-offline')
  await context.setOffline(false)

  await room.db.updateTable('membership').set({ passes: 1 }).where('person_id', '=', room.idOf.curlew).execute()
  const second = await room.enter(browser, 'curlew')
  await open(second.page, `${HOME}/sheet`)
  await heading(second.page, /lies on other people/)
  await lookAt(second.page, 'sheet-on-others')
  await second.context.close()

  // All go on to the bench, which the other walks need.
  await page.reload({ waitUntil: 'networkidle' })
  const unsent = page.getByRole('button', { name: /send on$/, pressed: false })
  while ((await unsent.count()) > 0) await unsent.first().click()
  await page.getByRole('button', { name: /^Next page/ }).click()
  await heading(page, 'The first pass is through')
  await lookAt(page, 'sheet-through')
  await page.keyboard.press('z')
  await page
    .getByRole('button', { name: /send on$/ })
    .first()
    .waitFor()
  await page.getByRole('button', { name: /^Next page/ }).click()
  await page.getByText(/marks? on the way/).waitFor({ state: 'detached' })

  const grader = await room.enter(browser, 'dunlin')
  await open(grader.page, `${HOME}/sheet`)
  await heading(grader.page, 'The first pass is made by others')
  await lookAt(grader.page, 'sheet-of-others')
  await grader.context.close()
  await setCampaign(room, { uses_sheet: 0 })
  await open(page, `${HOME}/sheet`)
  await heading(page, 'No first pass here')
  await lookAt(page, 'sheet-closed')
  expect(surprises(errors)).toEqual([])
  await context.close()
}, 300_000)

it('the bench: a candidate with all that opens, waiting grades, a refusal, a break, an asked look, the end', async () => {
  const { page, context, errors } = await room.enter(browser, 'curlew')
  await open(page, BENCH)
  await untilGradable(page)
  await lookAt(page, 'bench-candidate')
  await page.keyboard.press('t')
  await page.getByRole('button', { name: /four images/ }).waitFor()
  await lookAt(page, 'bench-tags')
  await page.keyboard.press('Escape')
  await page.keyboard.press('m')
  await page.getByRole('textbox').first().fill('A faint arc in the north-east, bluer than the galaxy.')
  await lookAt(page, 'bench-remark')
  await page.keyboard.press('Escape')
  await page.keyboard.press('r')
  await lookAt(page, 'bench-ruler')
  await page.keyboard.press('Escape')
  await page.keyboard.press('l')
  await lookAt(page, 'bench-light')
  await page.keyboard.press('l')
  await page.keyboard.press('?')
  await page.getByRole('dialog').waitFor()
  await lookAt(page, 'bench-help')
  await page.getByRole('button', { name: 'Change the keys' }).click()
  await page.getByRole('dialog', { name: 'Your keys' }).waitFor()
  await lookAt(page, 'bench-keys')
  await page.keyboard.press('Escape')

  await giveGrade(page, 'u')
  await lookAt(page, 'bench-cannot-judge')
  await page.keyboard.press('z')
  await page.getByText('Looking back').waitFor()
  await lookAt(page, 'bench-looking-back')
  await page.keyboard.press('k')

  await context.setOffline(true)
  for (const letter of ['a', 'n', 'c']) await giveGrade(page, letter)
  await page
    .getByText(/^3 waiting\. The server cannot be reached/)
    .first()
    .waitFor()
  await lookAt(page, 'bench-three-waiting')
  await page.keyboard.press('e')
  await heading(page, 'Thank you for looking')
  await lookAt(page, 'bench-end-with-waiting')
  await page.keyboard.press('e')
  await context.setOffline(false)
  await page.getByText('All grades saved').first().waitFor()

  await page.route('**/grade', (route) =>
    route.fulfill({
      status: 409,
      contentType: 'application/problem+json',
      body: JSON.stringify({
        type: 'urn:ringside:candidate-full',
        title: 'Conflict',
        status: 409,
        detail: 'This candidate has all the grades that are wanted. Thank you all the same; go on with the next.',
      }),
    }),
  )
  await giveGrade(page, 'b')
  await page.getByRole('button', { name: '1 grade was not taken' }).waitFor()
  await lookAt(page, 'bench-refused')
  await page.unroute('**/grade')
  await page.getByRole('button', { name: '1 grade was not taken' }).click()
  await page.getByRole('button', { name: 'I have read this' }).click()

  for (let n = 0; n < 20; n++) await giveGrade(page, 'n')
  await page.getByText('The last twenty went by fast.').waitFor()
  await lookAt(page, 'bench-break')
  await page.keyboard.press('e')
  await heading(page, 'Thank you for looking')
  await lookAt(page, 'bench-end')

  const [seen] = await room.db
    .selectFrom('grade')
    .innerJoin('candidate', 'candidate.id', 'grade.candidate_id')
    .select('candidate_id')
    .where('person_id', '=', room.idOf.curlew)
    .where('truth', 'is', null)
    .execute()
  await insertAskedLook(room.db, {
    campaignId: room.campaignId,
    candidateId: seen.candidate_id,
    personId: room.idOf.curlew,
    askedBy: room.idOf.avocet,
    note: 'Two of us see a counter-image south of the core. Do you?',
    now: new Date().toISOString(),
  })
  await open(page, BENCH)
  await untilGradable(page)
  await page.getByText('counter-image').first().waitFor()
  await lookAt(page, 'bench-asked')

  await page.route('**/queue?*', (route) => route.abort())
  await open(page, BENCH)
  for (let n = 0; n < 5; n++) {
    if ((await headingOf(page)) === 'The next candidates did not come') break
    await giveGrade(page, 'n')
  }
  await heading(page, 'The next candidates did not come')
  await lookAt(page, 'bench-did-not-come')
  await page.unroute('**/queue?*')
  await open(page, BENCH)
  for (let n = 0; n < CANDIDATES && (await headingOf(page))?.startsWith('No. '); n++) await giveGrade(page, 'n')
  await heading(page, 'Nothing is left for you')
  await lookAt(page, 'bench-nothing-left')
  expect(surprises(errors)).toEqual([])
  await context.close()
}, 420_000)

it('the bench of who may not grade, and of a campaign without pictures', async () => {
  const viewer = await room.enter(browser, 'egret')
  await open(viewer.page, BENCH)
  await heading(viewer.page, 'The bench is for graders')
  await lookAt(viewer.page, 'bench-closed')
  const lead = await room.enter(browser, 'avocet')
  await open(lead.page, `/campaigns/${NEW_SLUG}/bench`)
  await heading(lead.page, 'No pictures to grade yet')
  await lookAt(lead.page, 'bench-no-pictures')
  expect([...surprises(viewer.errors), ...surprises(lead.errors)]).toEqual([])
  await viewer.context.close()
  await lead.context.close()
}, 120_000)

it('calibration: nothing, galaxies to choose from, what would come, what was made', async () => {
  const { page, context, errors } = await room.enter(browser, 'avocet')
  await open(page, `/campaigns/${NEW_SLUG}/calibration`)
  await heading(page, 'No calibration stamps yet')
  await lookAt(page, 'calibration-nothing')
  await open(page, `${HOME}/calibration`)
  await heading(page, /calibration stamps/)
  await page.getByRole('button', { name: 'All', exact: true }).click()
  const galaxies = page.getByRole('listitem').getByRole('button', { name: /SWS/ })
  await galaxies.first().waitFor()
  for (const n of [0, 1]) await galaxies.nth(n).click()
  await page.getByText('Painting…').waitFor({ state: 'detached' })
  await page.waitForLoadState('networkidle')
  await lookAt(page, 'calibration-preview')
  await page.getByRole('button', { name: /^Make 2 stamps/ }).click()
  // A galaxy that cannot be painted over is left out.
  await vi.waitFor(async () => expect(await countStamps()).toBeGreaterThan(STAMPS), { timeout: 60_000, interval: 300 })
  await heading(page, new RegExp(`^(${STAMPS + 1}|${STAMPS + 2}) calibration stamps`))
  await lookAt(page, 'calibration-made')
  expect(surprises(errors)).toEqual([])
  await context.close()
}, 240_000)

it('practice: nothing, before the bench, a stamp, its truth after right and wrong answers, the end', async () => {
  const lead = await room.enter(browser, 'avocet')
  await open(lead.page, `/campaigns/${NEW_SLUG}/practice`)
  await heading(lead.page, 'Nothing to practise on yet')
  await lookAt(lead.page, 'practice-nothing')
  await lead.context.close()
  await setCampaign(room, { practice_wanted: 3 })
  const { page, context, errors } = await room.enter(browser, 'dunlin')
  await open(page, BENCH)
  await heading(page, 'First a little practice')
  await lookAt(page, 'practice-first')
  await page.getByRole('link', { name: 'Begin' }).click()
  await untilGradable(page)
  await lookAt(page, 'practice-stamp')
  const goOn = page.getByRole('button', { name: /Go on|Next/ }).first()
  for (let n = 0; n < 12 && !(await page.getByText('That was all there is to practise').isVisible()); n++) {
    await untilGradable(page)
    await page.keyboard.press(n % 2 === 0 ? 'a' : 'n')
    await goOn.waitFor()
    if (n < 2) await lookAt(page, `practice-truth-${n}`)
    await goOn.click()
    await goOn.waitFor({ state: 'detached' })
  }
  await heading(page, 'That was all there is to practise')
  await lookAt(page, 'practice-end')
  expect(surprises(errors)).toEqual([])
  await context.close()
}, 240_000)

it('a grader’s page: nothing yet, their own, and for a lead’s eyes', async () => {
  const newcomer = await room.enter(browser, 'dunlin')
  await open(newcomer.page, `${HOME}/me`)
  await heading(newcomer.page, /^You have graded/)
  await lookAt(newcomer.page, 'record-nothing')
  await newcomer.context.close()
  const { page, context, errors } = await room.enter(browser, 'curlew')
  await open(page, `${HOME}/me`)
  await heading(page, /^You have graded/)
  await lookAt(page, 'record-own')
  await context.close()
  const lead = await room.enter(browser, 'avocet')
  await open(lead.page, `${HOME}/people/${room.idOf.curlew}`)
  await heading(lead.page, /^curlew has graded/)
  await lookAt(lead.page, 'record-for-lead')
  expect([...surprises(errors), ...surprises(lead.errors)]).toEqual([])
  await lead.context.close()
}, 240_000)
