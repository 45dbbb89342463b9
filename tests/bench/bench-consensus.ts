/**
 * Consensus: the reliability model against a plain numpy script that does the same work, its cost in grades and its memory; then
 * through a database of 100,000 candidates a whole run, one grade's update, and a moved threshold. Each with its aim.
 */
import { execFile } from 'node:child_process'
import { fileURLToPath } from 'node:url'
import { promisify } from 'node:util'
import type { Calls, ConsensusRun, TimedSpan } from './_consensus-run'
import { againstAim } from './_aim'
import { benchReliability } from './bench-reliability'

const CANDIDATES = 100_000

export async function benchConsensus(): Promise<string[]> {
  return [...(await benchReliability()), ...(await throughDatabase())]
}

async function throughDatabase(): Promise<string[]> {
  const script = fileURLToPath(new URL('./_consensus-run.ts', import.meta.url))
  const { stdout } = await promisify(execFile)(
    process.execPath,
    ['--conditions=react-server', '--import', 'tsx', script, String(CANDIDATES)],
    { maxBuffer: 2 ** 24 },
  )
  const run = JSON.parse(stdout) as ConsensusRun
  const size = `${run.candidates.toLocaleString('en')} candidates, ${run.grades.toLocaleString('en')} grades`
  return [
    `consensus, a whole run through the database, ${size}: ${span(run.first)}; again after ${run.grade.wall.length} grades: ${span(run.again)}`,
    `consensus, peak memory of that process, ${run.peakMegabytes.toFixed(0)} MB`,
    `consensus, one grade recorded with its estimate: ${spread(run.grade)}; ${againstAim(median(run.grade.wall), 5, 'ms')}`,
    `consensus, the next ten candidates lent: ${spread(run.lend)}`,
    `consensus, what if: numbers of all candidates read in ${span(run.readWhatIf)}, ${run.readWhatIf.megabytes.toFixed(2)} MB sent`,
    `consensus, what if: a threshold moved, with changes, quality, curve and histogram: ${spread(run.move)}; ` +
      againstAim(median(run.move.wall), 100, 'ms'),
  ]
}

const span = ({ seconds, longestBlockMs }: TimedSpan) =>
  `${seconds.toFixed(2)} s, longest block of the event loop ${longestBlockMs.toFixed(0)} ms`

/** Of sorted times. */
const median = (times: readonly number[]) => times[Math.floor(times.length / 2)]

const spread = ({ wall, processor }: Calls) =>
  `median ${median(wall).toFixed(1)} ms (${median(processor).toFixed(1)} ms of the processor), longest ` +
  `${wall[wall.length - 1].toFixed(1)} ms of ${wall.length}`
