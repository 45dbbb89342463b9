/**
 * The reliability model against a plain numpy script that does the same work: the same grades, smoothing and tolerance, in
 * the same minute on the same machine. Then its cost from 50,000 to 5,000,000 grades, its memory, one grade's update, and a
 * moved threshold.
 */
import { execFile } from 'node:child_process'
import { existsSync } from 'node:fs'
import { mkdtemp, rm } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { promisify } from 'node:util'
import { decideByReliability, DEFAULT_RELIABILITY_RULE } from '@/lib/science/agreement/reliability-rule'
import type { Answer } from '@/lib/science/agreement/grades'
import {
  changedOutcomes,
  OUTCOMES,
  outcomesByReliability,
  type CandidateTallies,
} from '@/lib/science/agreement/outcomes-at-once'
import { probabilityOf } from '@/lib/science/agreement/posterior'
import { promisedQuality } from '@/lib/science/agreement/rule-quality'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'
import type { ReliabilityRun } from './_reliability-run'

const run = promisify(execFile)

async function fitOf(grades: number, csv: string[] = []): Promise<ReliabilityRun> {
  const script = fileURLToPath(new URL('./_reliability-run.ts', import.meta.url))
  const { stdout } = await run(process.execPath, ['--import', 'tsx', script, String(grades), ...csv])
  return JSON.parse(stdout) as ReliabilityRun
}

/**
 * @param peers folder of the peer scripts; RINGSIDE_PEERS when left out. Without it the comparison is skipped and said so.
 * Python is `python3`, or what RINGSIDE_PYTHON names: it must have numpy.
 */
export async function benchReliability(peers = process.env.RINGSIDE_PEERS): Promise<string[]> {
  return [...(await compareWithPeer(peers)), ...(await costInGrades()), oneGrade(), whatIf()]
}

async function compareWithPeer(peers: string | undefined): Promise<string[]> {
  const peer = peers ? join(peers, 'reliability.py') : null
  if (!peer || !existsSync(peer)) {
    return ['reliability, against numpy: skipped, because RINGSIDE_PEERS names no folder with reliability.py']
  }
  const folder = await mkdtemp(join(tmpdir(), 'ringside-bench-'))
  try {
    const csv = join(folder, 'grades.csv')
    const ours = await fitOf(500_000, [csv])
    const { stdout } = await run(process.env.RINGSIDE_PYTHON ?? 'python3', [peer, csv])
    const theirs = /([\d.]+) s, (\d+) iterations, shares (\[.*\])/.exec(stdout)
    if (!theirs) return [`reliability, against numpy: the peer printed what is not understood: ${stdout.trim()}`]
    const shares = JSON.parse(theirs[3]) as number[]
    const apart = Math.max(...shares.map((share, c) => Math.abs(share - ours.classShares[c])))
    return [
      `reliability, 500,000 grades of 100,000 candidates by 20 graders: ${ours.seconds.toFixed(2)} s against ` +
        `${theirs[1]} s, ${(Number(theirs[1]) / ours.seconds).toFixed(1)} times faster; iterations ${ours.iterations} ` +
        `and ${theirs[2]}; class shares ${apart <= 1e-6 ? 'equal to the printed 6 digits' : `differ by ${apart}`}`,
    ]
  } finally {
    await rm(folder, { recursive: true })
  }
}

async function costInGrades(): Promise<string[]> {
  const lines: string[] = []
  for (const grades of [50_000, 500_000, 5_000_000]) {
    const { seconds, iterations, peakMegabytes, startMegabytes } = await fitOf(grades)
    const nanoseconds = (seconds / iterations / grades) * 1e9
    lines.push(
      `reliability, ${grades.toLocaleString('en')} grades: ${seconds.toFixed(2)} s in ${iterations} iterations, ` +
        `${nanoseconds.toFixed(1)} ns a grade and iteration; peak memory ${peakMegabytes.toFixed(0)} MB, ` +
        `of which ${startMegabytes.toFixed(0)} MB before the grades`,
    )
  }
  return lines
}

/** A new grade's verdict with its reason, as when it arrives: ten grades of one candidate decided anew. */
function oneGrade(): string {
  const rates = { lens: [0.5, 0.3, 0.15, 0.05], notLens: [0.02, 0.06, 0.2, 0.72] }
  const letters: Answer[] = ['A', 'B', 'N', 'C', 'U', 'A', 'B', 'B', 'N', 'A']
  const answers = letters.map((grade, at) => ({ grade, rates, grader: `grader ${at}` }))
  const times = 2000
  const started = performance.now()
  for (let at = 0; at < times; at++) decideByReliability(DEFAULT_RELIABILITY_RULE, answers, 0.02)
  const microseconds = ((performance.now() - started) / times) * 1000
  return `reliability, one grade: verdict and reason of a candidate with ten grades in ${microseconds.toFixed(0)} µs`
}

/** A threshold moved: outcomes of 100,000 candidates with five grades each, what changed, and the quality promised. */
function whatIf(): string {
  const candidates = 100_000
  const random = new SeededRandom(4)
  const evidence = Float64Array.from({ length: candidates }, () => random.normal() * 4 - 4)
  const five = new Uint16Array(candidates).fill(5)
  const points = new Float64Array(candidates)
  const tallies: CandidateTallies = { looks: five, grades: five, points, squaredPoints: points, evidence }
  const probabilities = evidence.map(probabilityOf)
  const before = outcomesByReliability(tallies, DEFAULT_RELIABILITY_RULE)
  const confirmed = OUTCOMES.indexOf('confirmed')
  const times = 20
  const started = performance.now()
  for (let at = 1; at <= times; at++) {
    const after = outcomesByReliability(tallies, { ...DEFAULT_RELIABILITY_RULE, falseConfirmed: 0.001 * at })
    changedOutcomes(before, after)
    promisedQuality(probabilities, (candidate) => after[candidate] === confirmed)
  }
  const milliseconds = (performance.now() - started) / times
  return `reliability, what if: 100,000 candidates under another threshold in ${milliseconds.toFixed(1)} ms`
}

if (process.argv[1] === fileURLToPath(import.meta.url)) {
  for (const line of await benchReliability(process.argv[2])) console.log(line)
}
