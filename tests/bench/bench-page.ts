// The grading bench in Chromium on the built server: from key press to the next stamp painted, layout shifts, memory and the script
// of the first load. All by the browser's own instruments.
import { existsSync } from 'node:fs'
import type { CDPSession, Page } from 'playwright-core'
import { fullSearch } from '@/tests/_support/survey-files'
import { SurveyRun } from '@/tests/_support/survey-run'
import { EMAIL, PASSWORD, SLUG } from '@/tests/_support/survey-site'
import { launchBrowser } from '../e2e/_browser'
import { makeDataFolder, removeDataFolder } from '../e2e/_server'
import { againstAim } from './_aim'

const TIMED = 300
const HELD = 1000
const HEAP_EVERY = 100

interface Shown {
  /** Milliseconds from the key event's own time to the frame after the one that showed the next stamp. */
  paintedMs: number[]
  /** Frames that named the next candidate without its picture. */
  late: number
  /** Sum of all layout shifts, those right after a key among them, which the usual figure leaves out. */
  shift: number
  /** What moved, as it begins in the page. */
  moved: string[]
}

interface Shift {
  value: number
  sources: { node: Node | null }[]
}

/** In the page, before its own script. Event times and marks are of one clock. */
function watchPage(): void {
  const shown: Shown & { key: number; name: string } = { paintedMs: [], late: 0, shift: 0, moved: [], key: 0, name: '' }
  Object.assign(window, { shown })
  new PerformanceObserver((list) => {
    for (const entry of list.getEntries() as unknown as Shift[]) {
      shown.shift += entry.value
      const nodes = entry.sources.map(({ node }) => (node instanceof Element ? node : node?.parentElement))
      shown.moved.push(...nodes.map((node) => `${shown.name}: ${node?.outerHTML.slice(0, 160)}`))
    }
  }).observe({ type: 'layout-shift', buffered: true })
  window.addEventListener('keydown', ({ timeStamp }) => (shown.key = timeStamp), { capture: true })
  const painted = () => {
    const name = document.querySelector('h1')?.textContent ?? ''
    if (name === shown.name) return
    shown.name = name
    const { key } = shown
    shown.key = 0
    if (key === 0) return
    // Frame by frame until the shown view has its picture.
    const frame = () => {
      const image = document.querySelector<HTMLImageElement>('figure img[aria-hidden="false"]')
      if (!image?.complete || image.naturalWidth === 0) {
        shown.late++
        requestAnimationFrame(frame)
        return
      }
      // A task after the frame's own work: the frame has been handed over.
      const { port1, port2 } = new MessageChannel()
      port1.onmessage = () => {
        performance.mark('next stamp painted')
        const { duration } = performance.measure('key to stamp', { start: key, end: 'next stamp painted' })
        shown.paintedMs.push(duration)
        performance.clearMarks()
        performance.clearMeasures()
      }
      port2.postMessage(null)
    }
    requestAnimationFrame(frame)
  }
  document.addEventListener('DOMContentLoaded', () =>
    new MutationObserver(painted).observe(document.body, { subtree: true, childList: true, characterData: true }),
  )
}

const shownIn = (page: Page) => page.evaluate(() => (window as unknown as { shown: Shown }).shown)

async function heapBytes(session: CDPSession): Promise<number> {
  await session.send('HeapProfiler.collectGarbage')
  await session.send('HeapProfiler.collectGarbage')
  const { usedSize } = (await session.send('Runtime.getHeapUsage')) as { usedSize: number }
  return usedSize
}

async function gradeNext(page: Page): Promise<void> {
  const before = await page.locator('h1').textContent()
  await page.waitForFunction(() => {
    const image = document.querySelector<HTMLImageElement>('figure img[aria-hidden="false"]')
    return image?.complete && image.naturalWidth > 0
  })
  // Keys are not heard in the first 120 ms of a candidate.
  await page.waitForTimeout(150)
  await page.keyboard.press('n')
  await page.waitForFunction((name) => document.querySelector('h1')?.textContent !== name, before, { timeout: 60_000 })
}

async function signIn(page: Page, url: string): Promise<void> {
  await page.goto(`${url}/signin`, { waitUntil: 'networkidle' })
  await page.getByLabel('E-mail').fill(EMAIL)
  await page.getByLabel('Password', { exact: true }).fill(PASSWORD)
  await page.keyboard.press('Enter')
  await page.waitForURL((address) => address.pathname !== '/signin')
}

interface Script {
  name: string
  bytes: number
  afterLoad: boolean
}

/** Opens the bench in a browser that has nothing cached, and tells the scripts that came, compressed. */
async function openBench(page: Page, session: CDPSession, url: string): Promise<Script[]> {
  await session.send('Network.enable')
  await session.send('Network.clearBrowserCache')
  const names = new Map<string, string>()
  const scripts: Script[] = []
  let loaded = false
  page.once('load', () => (loaded = true))
  session.on('Network.responseReceived', ({ requestId, type, response }) => {
    if (type === 'Script') names.set(requestId, response.url.split('/').at(-1) ?? '')
  })
  session.on('Network.loadingFinished', ({ requestId, encodedDataLength }) => {
    const name = names.get(requestId)
    if (name) scripts.push({ name, bytes: encodedDataLength, afterLoad: loaded })
  })
  await page.goto(`${url}/campaigns/${SLUG}/bench`)
  await page.waitForLoadState('load')
  await page.waitForTimeout(5000)
  return scripts
}

const kilobytes = (scripts: readonly Script[]) => scripts.reduce((sum, { bytes }) => sum + bytes, 0) / 1000

function scriptLines(scripts: readonly Script[]): string[] {
  const first = scripts.filter(({ afterLoad }) => !afterLoad)
  const largest = [...first].sort((a, b) => b.bytes - a.bytes).slice(0, 8)
  return [
    `  script of the first load, compressed: ${kilobytes(first).toFixed(0)} kB (${againstAim(kilobytes(first), 200, 'kB')}); ${kilobytes(scripts.filter(({ afterLoad }) => afterLoad)).toFixed(0)} kB more in quiet moments`,
    `  largest: ${largest.map(({ name, bytes }) => `${name} ${(bytes / 1000).toFixed(1)}`).join(', ')}`,
  ]
}

export async function benchPage(held = HELD): Promise<string[]> {
  if (!existsSync('.next/BUILD_ID')) return ['bench-page: there is no build. Run npm run build first.']
  const timed = Math.min(TIMED, held)
  const dataFolder = await makeDataFolder()
  const run = new SurveyRun(dataFolder)
  const browser = await launchBrowser()
  try {
    await run.begin()
    await run.send(fullSearch(held + 20))
    await run.settle()
    const context = await browser.newContext({ viewport: { width: 1440, height: 900 }, colorScheme: 'dark' })
    const page = await context.newPage()
    await signIn(page, run.url)
    const session = await context.newCDPSession(page)
    // What runs this file wraps named functions in a helper of its own, which the page does not have.
    await page.addInitScript('globalThis.__name = (named) => named')
    await page.addInitScript(watchPage)
    const scripts = await openBench(page, session, run.url)
    const heaps: number[] = []
    let sorted: number[] = []
    let late = 0
    for (let given = 1; given <= held; given++) {
      await gradeNext(page)
      if (given === timed) {
        // The last one is still on its way to the screen.
        await page.waitForTimeout(300)
        const seen = await shownIn(page)
        // A stamp that was never painted took longer than any other.
        sorted = Array.from({ length: timed }, (_, n) => seen.paintedMs[n] ?? Infinity).sort((a, b) => a - b)
        late = seen.late
      }
      if (given % HEAP_EVERY === 0) heaps.push(await heapBytes(session))
    }
    const { shift, moved } = await shownIn(page)
    const at = (share: number) => sorted[Math.min(sorted.length - 1, Math.floor(share * sorted.length))]
    const perCandidate = heaps.length > 1 ? (heaps[heaps.length - 1] - heaps[0]) / (HEAP_EVERY * (heaps.length - 1)) : 0
    return [
      `The bench in Chromium, ${held} candidates graded by key`,
      `  key press to next stamp painted, ${sorted.filter(Number.isFinite).length} of ${timed} painted: median ${at(0.5).toFixed(0)} ms, p95 ${at(0.95).toFixed(0)} ms, most ${at(1).toFixed(0)} ms (${againstAim(at(0.95), 50, 'ms')}); ${late} frames without their picture`,
      `  layout shift in all, those after a key too: ${shift.toFixed(6)} (aim 0: ${shift === 0 ? 'met' : 'NOT MET'})`,
      ...moved.slice(0, 5).map((what) => `    moved at ${what}`),
      `  heap after garbage collection, each ${HEAP_EVERY}: ${heaps.map((bytes) => (bytes / 1e6).toFixed(1)).join(' ')} MB; ${perCandidate.toFixed(0)} bytes a candidate, which is its place in undo`,
      ...scriptLines(scripts),
    ]
  } finally {
    await browser.close()
    await run.end()
    await removeDataFolder(dataFolder)
  }
}
