// A lens model dragged over a candidate's picture in Chromium on the built server: what one frame takes, and how far frames are apart.
// All by the browser's own marks.
import { existsSync } from 'node:fs'
import type { CDPSession, Page } from 'playwright-core'
import { fullSearch } from '@/tests/_support/survey-files'
import { SurveyRun } from '@/tests/_support/survey-run'
import { EMAIL, PASSWORD, SLUG } from '@/tests/_support/survey-site'
import { launchBrowser } from '../e2e/_browser'
import { makeDataFolder, removeDataFolder } from '../e2e/_server'
import { againstAim } from './_aim'

const MOVES = 300
/** Sixty frames a second. */
const FRAME_MS = 16.7
const HOME = `/campaigns/${SLUG}`

interface Frames {
  /** From the pointer's event to a task after the frame that shows it. */
  workMs: number[]
  /** From one frame to the next. */
  apartMs: number[]
}

/** In the page. The listener stands before React's, so that all of its work is in the measure. */
function watchFrames(): void {
  const frames: Frames & { last: number } = { workMs: [], apartMs: [], last: 0 }
  Object.assign(window, { frames })
  let open = false
  window.addEventListener(
    'pointermove',
    () => {
      if (open) return
      open = true
      performance.mark('moved')
      requestAnimationFrame(() => {
        const { port1, port2 } = new MessageChannel()
        port1.onmessage = () => {
          open = false
          performance.mark('drawn')
          frames.workMs.push(performance.measure('move to frame', 'moved', 'drawn').duration)
          performance.clearMarks()
          performance.clearMeasures()
        }
        port2.postMessage(null)
      })
    },
    { capture: true },
  )
  const tick = (now: number) => {
    if (frames.last > 0) frames.apartMs.push(now - frames.last)
    frames.last = now
    requestAnimationFrame(tick)
  }
  requestAnimationFrame(tick)
}

async function dragSource(page: Page): Promise<Frames> {
  const box = await page.locator('[data-measuring]').boundingBox()
  if (!box) throw new Error('There is no picture to drag over.')
  const [x, y] = [box.x + box.width / 2, box.y + box.height / 2]
  await page.mouse.move(x + 80, y)
  await page.mouse.down()
  await page.evaluate(watchFrames)
  // Twice across the caustic and back, with all that changes there.
  for (let move = 0; move < MOVES; move++) {
    const angle = (8 * Math.PI * move) / MOVES
    await page.mouse.move(x + 80 + 40 * Math.sin(angle), y + 25 * Math.sin(1.7 * angle))
  }
  await page.mouse.up()
  return page.evaluate(() => (window as unknown as { frames: Frames }).frames)
}

/** Of the page's main thread: what a busy machine does not change. */
async function processorMs(session: CDPSession): Promise<number> {
  const { metrics } = (await session.send('Performance.getMetrics')) as { metrics: { name: string; value: number }[] }
  return 1000 * (metrics.find(({ name }) => name === 'TaskDuration')?.value ?? Number.NaN)
}

const at = (values: readonly number[], share: number): number => {
  const sorted = [...values].sort((a, b) => a - b)
  return sorted[Math.min(sorted.length - 1, Math.floor(share * sorted.length))] ?? Number.NaN
}

export async function benchMeasuring(): Promise<string[]> {
  if (!existsSync('.next/BUILD_ID')) return ['measuring: there is no build. Run npm run build first.']
  const dataFolder = await makeDataFolder()
  const run = new SurveyRun(dataFolder)
  const browser = await launchBrowser()
  try {
    await run.begin()
    await run.send(fullSearch(2))
    await run.settle()
    const context = await browser.newContext({ viewport: { width: 1440, height: 900 }, colorScheme: 'dark' })
    const page = await context.newPage()
    await page.addInitScript('globalThis.__name = (named) => named')
    await page.goto(`${run.url}/signin`, { waitUntil: 'networkidle' })
    await page.getByLabel('E-mail').fill(EMAIL)
    await page.getByLabel('Password', { exact: true }).fill(PASSWORD)
    await page.keyboard.press('Enter')
    await page.waitForURL((address) => address.pathname !== '/signin')
    await page.goto(`${run.url}${HOME}/candidates/1`, { waitUntil: 'networkidle' })
    await page.getByRole('button', { name: 'Would a lens do this?' }).click()
    await page.waitForTimeout(1000)
    const session = await context.newCDPSession(page)
    await session.send('Performance.enable', { timeDomain: 'threadTicks' })
    const before = await processorMs(session)
    const { workMs, apartMs } = await dragSource(page)
    const processor = ((await processorMs(session)) - before) / workMs.length
    const within = workMs.filter((ms) => ms <= FRAME_MS).length / workMs.length
    return [
      `A lens model dragged in Chromium (drawn by software), ${workMs.length} frames of ${MOVES} moves`,
      `  pointer event to frame done: median ${at(workMs, 0.5).toFixed(1)} ms, p95 ${at(workMs, 0.95).toFixed(1)} ms, most ${at(workMs, 1).toFixed(1)} ms (${againstAim(at(workMs, 0.95), FRAME_MS, 'ms')}); ${(100 * within).toFixed(0)} % within a frame of 60 a second`,
      `  processor time of the page's thread: ${processor.toFixed(1)} ms a frame (${againstAim(processor, FRAME_MS, 'ms')})`,
      `  frame to frame meanwhile: median ${at(apartMs, 0.5).toFixed(1)} ms, p95 ${at(apartMs, 0.95).toFixed(1)} ms`,
    ]
  } finally {
    await browser.close()
    await run.end()
    await removeDataFolder(dataFolder)
  }
}
