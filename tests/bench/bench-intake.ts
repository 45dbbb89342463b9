// Intake at survey scale through the real server (next start on the build), twice: undisturbed, and killed five times at random
// moments. Memory, the time of page requests meanwhile beside that of the same server at rest, and whether both came to the same.
import { createHash } from 'node:crypto'
import { existsSync } from 'node:fs'
import { loadavg } from 'node:os'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'
import { fullSearch, type SurveyFile } from '../_support/survey-files'
import { SurveyRun } from '../_support/survey-run'
import { intakeResult, SLUG } from '../_support/survey-site'
import { makeDataFolder, removeDataFolder } from '../e2e/_server'

const CANDIDATES = 10_000
const KILLS = 5
const PAGES = [
  `/campaigns/${SLUG}`,
  `/campaigns/${SLUG}/intake`,
  `/campaigns/${SLUG}/candidates`,
  `/api/campaigns/${SLUG}/files?limit=50&first=refused`,
]
const LOOK_EVERY_MS = 400
const LOOKS_AT_REST = 60

interface Watched {
  kills: number
  restMs: number[]
  load: number
  seconds: number
  sendSeconds: number
  peakBytes: number
  pageMs: number[]
  result: Awaited<ReturnType<typeof intakeResult>>
}

/** A page's time in milliseconds; null where the server was down or went down meanwhile. */
async function look(run: SurveyRun, turn: number): Promise<number | null> {
  const began = performance.now()
  const kills = run.kills
  const response = await run.request(PAGES[turn % PAGES.length]).catch(() => null)
  await response?.arrayBuffer().catch(() => null)
  const wasUp = run.starting === null && run.kills === kills
  return wasUp && response?.ok ? performance.now() - began : null
}

async function atRest(run: SurveyRun): Promise<number[]> {
  const times: (number | null)[] = []
  for (let turn = 0; turn < PAGES.length + LOOKS_AT_REST; turn++) times.push(await look(run, turn))
  // The first request of a page loads its code.
  return times.slice(PAGES.length).filter((time) => time !== null)
}

const pause = (ms: number) => new Promise((resolve) => setTimeout(resolve, ms))

/**
 * Sends everything, asks for pages meanwhile, and kills the server a moment after so many files have been acknowledged; the last
 * kill comes when nothing is left to be sent.
 */
async function watch(
  files: readonly SurveyFile[],
  killAt: { acknowledged: number; delayMs: number }[],
): Promise<Watched> {
  const folder = await makeDataFolder()
  const run = new SurveyRun(folder)
  await run.begin()
  const restMs = await atRest(run)
  const pageMs: number[] = []
  let peakBytes = 0
  let over = false
  const looking = (async () => {
    for (let turn = 0; !over; turn++) {
      peakBytes = Math.max(peakBytes, run.residentBytes)
      const time = await look(run, turn)
      if (time !== null) pageMs.push(time)
      await pause(LOOK_EVERY_MS)
    }
  })()
  const pending = killAt.toSorted((a, b) => a.acknowledged - b.acknowledged)
  let killing: Promise<void> = Promise.resolve()
  const kill = (delayMs: number) => void (killing = killing.then(() => pause(delayMs)).then(() => run.kill()))
  const began = performance.now()
  await run.send(files, () => {
    if (pending.length > 0 && run.acknowledged >= pending[0].acknowledged) kill(pending.shift()?.delayMs ?? 0)
  })
  const sendSeconds = (performance.now() - began) / 1000
  await killing
  await run.settle()
  const seconds = (performance.now() - began) / 1000
  const [load] = loadavg()
  over = true
  await looking
  await run.end()
  const result = await intakeResult(folder)
  await removeDataFolder(folder)
  return { kills: run.kills, restMs, load, seconds, sendSeconds, peakBytes, pageMs, result }
}

const digest = (value: unknown): string => createHash('sha256').update(JSON.stringify(value)).digest('hex').slice(0, 16)

function percentile(values: readonly number[], share: number): number {
  const sorted = values.toSorted((a, b) => a - b)
  return sorted[Math.min(sorted.length - 1, Math.floor(share * sorted.length))] ?? NaN
}

function lines(label: string, watched: Watched): string[] {
  const { kills, restMs, load, seconds, sendSeconds, peakBytes, pageMs, result } = watched
  const { files, candidates, stamps, imaged, planes } = result
  const [rest, during] = [restMs, pageMs].map((times) => ({
    half: percentile(times, 0.5),
    p95: percentile(times, 0.95),
  }))
  const cold = kills > 0 ? ', first requests after the kills included' : ''
  return [
    `${label}: ${files.length} files sent in ${sendSeconds.toFixed(0)} s, all imaged after ${seconds.toFixed(0)} s (${(files.length / seconds).toFixed(0)} files a second), load ${load.toFixed(1)}`,
    `  ${candidates.length} candidates, ${imaged} imaged, ${planes.length} planes, ${stamps.length} stamps; digest ${digest(result)}`,
    `  server memory at most ${(peakBytes / 1e6).toFixed(0)} MB (aim 700)`,
    `  pages at rest: median ${rest.half.toFixed(0)} ms, p95 ${rest.p95.toFixed(0)} ms`,
    `  ${pageMs.length} pages meanwhile: median ${during.half.toFixed(0)} ms, p95 ${during.p95.toFixed(0)} ms (aim 300), ${(during.half / rest.half).toFixed(1)} times that at rest${cold}`,
  ]
}

/** `npm run bench -- intake 300` does it with 300 candidates. */
export async function benchIntake(size?: number): Promise<string[]> {
  if (!existsSync('.next/BUILD_ID')) return ['intake: there is no build. Run npm run build first.']
  const candidates = size ?? CANDIDATES
  const files = fullSearch(candidates)
  const calm = await watch(files, [])
  const random = new SeededRandom(5)
  const moments = Array.from({ length: KILLS - 1 }, () => Math.ceil(random.between(0.05, 0.95) * files.length))
  const rough = await watch(
    files,
    [...moments, files.length].map((acknowledged) => ({ acknowledged, delayMs: random.between(0, 300) })),
  )
  const same = digest(calm.result) === digest(rough.result)
  return [
    `Intake of ${candidates} candidates in 3 bands through the real server`,
    ...lines('undisturbed', calm),
    ...lines(`killed ${rough.kills} times`, rough),
    same ? 'both came to the same files, hashes, planes and stamps' : 'THE TWO DIFFER: something was lost or doubled',
  ]
}
