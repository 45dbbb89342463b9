/**
 * The queue with a million candidates and fifty graders at work in one process, for each order of the mean method and by the
 * reliability method: 'next five' with pictures and counts as the route answers it, and recording a grade, each with its aim; then the
 * plans by which SQLite finds what it serves.
 */
import { execFile } from 'node:child_process'
import { fileURLToPath } from 'node:url'
import { promisify } from 'node:util'
import { againstAim } from './_aim'
import type { QueueMode, QueueRun } from './_queue-run'

const MODES: readonly QueueMode[] = ['most needed', 'reliability', 'score', 'shuffled']
const AIM_MS = 20

export async function benchQueue(candidates = 1_000_000): Promise<string[]> {
  const lines: string[] = []
  for (const mode of MODES) lines.push(...(await throughDatabase(candidates, mode)))
  return lines
}

async function throughDatabase(candidates: number, mode: QueueMode): Promise<string[]> {
  const script = fileURLToPath(new URL('./_queue-run.ts', import.meta.url))
  const { stdout } = await promisify(execFile)(
    process.execPath,
    ['--conditions=react-server', '--import', 'tsx', script, String(candidates), mode],
    { maxBuffer: 2 ** 24 },
  )
  const run = JSON.parse(stdout) as QueueRun
  const name = `queue, ${run.candidates.toLocaleString('en')} candidates, ${mode}`
  return [
    `${name}: next five ${spread(run.next)}; ${againstAim(at(run.next, 0.99), AIM_MS, 'ms')}`,
    `${name}: next five of who has graded ${(candidates / 20).toLocaleString('en')} in order, ${spread(run.nextOfDeepGrader)}`,
    `${name}: a grade recorded, synchronous=FULL, ${spread(run.grade)}; ${againstAim(at(run.grade, 0.99), AIM_MS, 'ms')}`,
    `${name}: first asked after the start ${spread(run.firstAsked)}; ${againstAim(at(run.firstAsked, 0.99), AIM_MS, 'ms')}`,
    `${name}: fifty in one instant, ${run.burst.all.toFixed(0)} ms until the last has an answer, ` +
      `${run.burst.processor.toFixed(1)} ms of the processor each; ${againstAim(run.burst.all, AIM_MS, 'ms')}`,
    `${name}: ${run.refused} refused, ${run.aboveWanted} above their wanted number; filled in ${run.fillSeconds.toFixed(0)} s`,
    ...run.plans.map((plan) => `    ${plan}`),
  ]
}

/** Of sorted times. */
const at = (times: readonly number[], share: number) =>
  times[Math.min(times.length - 1, Math.floor(times.length * share))]

const spread = (times: readonly number[]) =>
  `median ${at(times, 0.5).toFixed(1)}, p95 ${at(times, 0.95).toFixed(1)}, p99 ${at(times, 0.99).toFixed(1)}, longest ` +
  `${times[times.length - 1].toFixed(1)} ms of ${times.length}`
