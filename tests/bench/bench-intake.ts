// Intake at survey scale through the real server (next start on the build), twice: undisturbed, and killed five times at random
// moments. Memory, the time of page requests meanwhile, and whether both came to the same. RINGSIDE_BENCH_CANDIDATES=1000 is a tenth.
import { createHash } from 'node:crypto'
import { existsSync } from 'node:fs'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'
import { fullSearch, type SurveyFile } from '../_support/survey-files'
import { SurveyRun } from '../_support/survey-run'
import { intakeResult, SLUG } from '../_support/survey-site'
import { makeDataFolder, removeDataFolder } from '../e2e/_server'

const CANDIDATES = Number(process.env.RINGSIDE_BENCH_CANDIDATES ?? 10_000)
const KILLS = 5
const PAGES = [
  `/campaigns/${SLUG}`,
  `/campaigns/${SLUG}/intake`,
  `/campaigns/${SLUG}/candidates`,
  `/api/campaigns/${SLUG}/files?limit=50&first=refused`,
]
const LOOK_EVERY_MS = 400

interface Watched {
  seconds: number
  sendSeconds: number
  peakBytes: number
  pageMs: number[]
  result: Awaited<ReturnType<typeof intakeResult>>
}

/** Sends everything, asks for pages meanwhile, and kills the server when so many files have been acknowledged or imaged. */
async function watch(files: readonly SurveyFile[], killAt: number[]): Promise<Watched> {
  const folder = await makeDataFolder()
  const run = new SurveyRun(folder)
  await run.begin()
  const pageMs: number[] = []
  let peakBytes = 0
  let over = false
  let killing: Promise<void> = Promise.resolve()
  const looking = (async () => {
    for (let turn = 0; !over; turn++) {
      peakBytes = Math.max(peakBytes, run.residentBytes)
      const began = performance.now()
      const kills = run.kills
      const response = await run.request(PAGES[turn % PAGES.length]).catch(() => null)
      await response?.arrayBuffer().catch(() => null)
      const wasUp = run.starting === null && run.kills === kills
      // The first request of a page after a start loads its code.
      if (wasUp && response?.ok && turn >= PAGES.length) pageMs.push(performance.now() - began)
      await new Promise((resolve) => setTimeout(resolve, LOOK_EVERY_MS))
    }
  })()
  // Half of the kills fall into the sending, half into what is still being read after it; whichever count comes first.
  const pending = killAt.toSorted((a, b) => a - b)
  const perhapsKill = (settled: number) => {
    if (pending.length === 0 || settled < pending[0] || run.starting) return
    pending.shift()
    killing = killing.then(() => run.kill())
  }
  const began = performance.now()
  await run.send(files, () => perhapsKill(run.acknowledged / 2))
  const sendSeconds = (performance.now() - began) / 1000
  await run.settle(async ({ imaged }) => {
    perhapsKill(files.length / 2 + imaged / 2)
    await killing
  })
  const seconds = (performance.now() - began) / 1000
  over = true
  await looking
  await run.end()
  const result = await intakeResult(folder)
  await removeDataFolder(folder)
  return { seconds, sendSeconds, peakBytes, pageMs, result }
}

const digest = (value: unknown): string => createHash('sha256').update(JSON.stringify(value)).digest('hex').slice(0, 16)

function percentile(values: readonly number[], share: number): number {
  const sorted = values.toSorted((a, b) => a - b)
  return sorted[Math.min(sorted.length - 1, Math.floor(share * sorted.length))] ?? NaN
}

function lines(label: string, { seconds, sendSeconds, peakBytes, pageMs, result }: Watched): string[] {
  const { files, candidates, stamps, imaged, planes } = result
  return [
    `${label}: ${files.length} files sent in ${sendSeconds.toFixed(0)} s, all imaged after ${seconds.toFixed(0)} s (${(files.length / seconds).toFixed(0)} files a second)`,
    `  ${candidates.length} candidates, ${imaged} imaged, ${planes.length} planes, ${stamps.length} stamps; digest ${digest(result)}`,
    `  server memory at most ${(peakBytes / 1e6).toFixed(0)} MB (target 700)`,
    `  ${pageMs.length} page requests meanwhile: median ${percentile(pageMs, 0.5).toFixed(0)} ms, p95 ${percentile(pageMs, 0.95).toFixed(0)} ms (target 300)`,
  ]
}

export async function benchIntake(): Promise<string[]> {
  if (!existsSync('.next/BUILD_ID')) return ['intake: there is no build. Run npm run build first.']
  const files = fullSearch(CANDIDATES)
  const calm = await watch(files, [])
  const random = new SeededRandom(5)
  const rough = await watch(
    files,
    Array.from({ length: KILLS }, () => random.between(0.05, 0.95) * files.length),
  )
  const same = digest(calm.result) === digest(rough.result)
  return [
    `Intake of ${CANDIDATES} candidates in 3 bands through the real server`,
    ...lines('undisturbed', calm),
    ...lines(`killed ${KILLS} times`, rough),
    same ? 'both came to the same files, hashes, planes and stamps' : 'THE TWO DIFFER: something was lost or doubled',
  ]
}
