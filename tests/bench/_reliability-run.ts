/**
 * One fit of the reliability model in a process of its own, so that its memory can be read: makes seeded grades, fits them,
 * prints one line of JSON. Arguments: grades, and a CSV file to write the same grades to, or nothing.
 */
import { createWriteStream } from 'node:fs'
import { once } from 'node:events'
import { fitDawidSkene } from '@/lib/science/agreement/dawid-skene'
import { groupByCandidate, type FlatGrades } from '@/lib/science/agreement/grade-table'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'

export interface ReliabilityRun {
  seconds: number
  iterations: number
  classShares: number[]
  /** largest resident size that the process reached, and what it had before the grades were made */
  peakMegabytes: number
  startMegabytes: number
}

const GRADERS = 20
const GRADES = 4
const GRADES_A_CANDIDATE = 5

/** Graders of rising skill; 2, 4, 14 and 80 % of the candidates deserve A, B, C and N. */
function makeGrades(count: number): FlatGrades {
  const random = new SeededRandom(20261205)
  const candidates = Math.ceil(count / GRADES_A_CANDIDATE)
  const flat: FlatGrades = {
    candidates,
    graders: GRADERS,
    grades: GRADES,
    candidateOf: new Int32Array(count),
    graderOf: new Uint16Array(count),
    gradeOf: new Uint8Array(count),
  }
  let deserved = 0
  for (let entry = 0; entry < count; entry++) {
    if (entry % GRADES_A_CANDIDATE === 0) {
      const u = random.uniform()
      deserved = u < 0.02 ? 0 : u < 0.06 ? 1 : u < 0.2 ? 2 : 3
    }
    const grader = random.integer(0, GRADERS - 1)
    flat.candidateOf[entry] = Math.floor(entry / GRADES_A_CANDIDATE)
    flat.graderOf[entry] = grader
    flat.gradeOf[entry] = random.chance(0.5 + 0.02 * grader) ? deserved : random.integer(0, GRADES - 1)
  }
  return flat
}

async function writeCsv(flat: FlatGrades, path: string): Promise<void> {
  const stream = createWriteStream(path)
  stream.write('item,grader,grade\n')
  for (let from = 0; from < flat.gradeOf.length; from += 10_000) {
    const lines: string[] = []
    for (let entry = from; entry < Math.min(from + 10_000, flat.gradeOf.length); entry++) {
      lines.push(`${flat.candidateOf[entry]},${flat.graderOf[entry]},${flat.gradeOf[entry]}\n`)
    }
    if (!stream.write(lines.join(''))) await once(stream, 'drain')
  }
  stream.end()
  await once(stream, 'finish')
}

const [count, csv] = process.argv.slice(2)
const startMegabytes = process.memoryUsage().rss / 2 ** 20
const flat = makeGrades(Number(count))
if (csv) await writeCsv(flat, csv)
const started = performance.now()
const fit = fitDawidSkene(groupByCandidate(flat), {
  classes: GRADES,
  pseudoCounts: 1,
  shares: 'estimated',
  tolerance: 1e-6,
})
const run: ReliabilityRun = {
  seconds: (performance.now() - started) / 1000,
  iterations: fit.iterations,
  classShares: [...fit.classShares],
  peakMegabytes: process.resourceUsage().maxRSS / 1024,
  startMegabytes,
}
console.log(JSON.stringify(run))
