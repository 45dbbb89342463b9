/**
 * The reliability model against a plain numpy script that does the same work: the same grades, smoothing and tolerance, in
 * the same minute on the same machine. Then its cost from 50,000 to 5,000,000 grades, and its memory.
 */
import { execFile } from 'node:child_process'
import { existsSync } from 'node:fs'
import { mkdtemp, rm } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { promisify } from 'node:util'
import { againstAim, aimAtLeast } from './_aim'
import type { ReliabilityRun } from './_reliability-run'

const run = promisify(execFile)

/** Grades that both fit in the same minute; the aim for memory is for these. */
const PEER_GRADES = 500_000

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
  return [...(await compareWithPeer(peers)), ...(await costInGrades())]
}

async function compareWithPeer(peers: string | undefined): Promise<string[]> {
  const peer = peers ? join(peers, 'reliability.py') : null
  if (!peer || !existsSync(peer)) {
    return ['reliability, against numpy: skipped, because RINGSIDE_PEERS names no folder with reliability.py']
  }
  const folder = await mkdtemp(join(tmpdir(), 'ringside-bench-'))
  try {
    const csv = join(folder, 'grades.csv')
    const ours = await fitOf(PEER_GRADES, [csv])
    const { stdout } = await run(process.env.RINGSIDE_PYTHON ?? 'python3', [peer, csv])
    const theirs = /([\d.]+) s, (\d+) iterations, shares (\[.*\])/.exec(stdout)
    if (!theirs) return [`reliability, against numpy: the peer printed what is not understood: ${stdout.trim()}`]
    const shares = JSON.parse(theirs[3]) as number[]
    const apart = Math.max(...shares.map((share, c) => Math.abs(share - ours.classShares[c])))
    return [
      `reliability, 500,000 grades of 100,000 candidates by 20 graders: ${ours.seconds.toFixed(2)} s against ` +
        `${theirs[1]} s, ${(Number(theirs[1]) / ours.seconds).toFixed(1)} times faster; iterations ${ours.iterations} ` +
        `and ${theirs[2]}; class shares ${apart <= 1e-6 ? 'equal to the printed 6 digits' : `differ by ${apart}`}; ` +
        aimAtLeast(Number(theirs[1]) / ours.seconds, 5, 'times'),
    ]
  } finally {
    await rm(folder, { recursive: true })
  }
}

async function costInGrades(): Promise<string[]> {
  const lines: string[] = []
  for (const grades of [50_000, PEER_GRADES, 5_000_000]) {
    const { seconds, iterations, peakMegabytes, startMegabytes } = await fitOf(grades)
    const nanoseconds = (seconds / iterations / grades) * 1e9
    lines.push(
      `reliability, ${grades.toLocaleString('en')} grades: ${seconds.toFixed(2)} s in ${iterations} iterations, ` +
        `${nanoseconds.toFixed(1)} ns a grade and iteration; peak memory ${peakMegabytes.toFixed(0)} MB, ` +
        `of which ${startMegabytes.toFixed(0)} MB before the grades` +
        (grades <= PEER_GRADES ? `; ${againstAim(peakMegabytes, 300, 'MB')}` : ''),
    )
  }
  return lines
}
