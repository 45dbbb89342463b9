import { setImmediate as nextTurn } from 'node:timers/promises'
import type { RunModel } from '@/db/schema/consensus'
import { DawidSkeneModel } from '@/lib/science/agreement/dawid-skene-model'
import { UNKNOWN_TRUTH } from '@/lib/science/agreement/dawid-skene-options'
import { GRADES } from '@/lib/science/agreement/grades'
import { LENS, LENS_MODEL, lensShareWithPrior, ratesOfGraders } from '@/lib/science/agreement/lens-model'
import { newcomerRates } from '@/lib/work/queue/lens-estimate'
import type { RunGrades } from './read-grades'

const TOLERANCE = 1e-6
const MOST_ITERATIONS = 1000

/**
 * Fits the reliability of the graders, from the votes on, so that the input alone decides the result: the EM of `fitDawidSkene` an
 * iteration a turn, for the process to do other work in between (15 ms an iteration for a million grades).
 */
export async function fitModel(grades: RunGrades, leftOut: readonly number[]): Promise<RunModel> {
  const { table, truth, people } = grades
  const em = new DawidSkeneModel(table, { ...LENS_MODEL, truth })
  em.maximise()
  let iterations = 0
  let change = Infinity
  while (iterations < MOST_ITERATIONS && change >= TOLERANCE) {
    if (iterations > 0) em.maximise()
    change = em.expect()
    iterations += 1
    await nextTurn()
  }
  const rates = ratesOfGraders({
    classes: em.classes,
    grades: GRADES.length,
    graders: people.length,
    confusion: em.confusion(),
  })
  const counts = countGrades(grades)
  const graders = people.map((personId, grader) => ({
    personId,
    grades: counts.all[grader],
    calibrationGrades: counts.calibration[grader],
    lens: Array.from(rates[grader].lens),
    notLens: Array.from(rates[grader].notLens),
  }))
  return {
    lensShare: lensShareWithPrior(em.shares[LENS], counts.gradedCandidates),
    iterations,
    converged: change < TOLERANCE,
    logLikelihood: em.logLikelihood,
    graders: graders.sort((a, b) => a.personId - b.personId),
    newcomer: newcomerRates(),
    leftOut: [...leftOut],
  }
}

function countGrades({ table, truth, people }: RunGrades) {
  const all = new Int32Array(people.length)
  const calibration = new Int32Array(people.length)
  let gradedCandidates = 0
  for (let candidate = 0; candidate < table.candidates; candidate++) {
    const [from, to] = [table.start[candidate], table.start[candidate + 1]]
    const known = truth[candidate] !== UNKNOWN_TRUTH
    if (to > from && !known) gradedCandidates += 1
    for (let entry = from; entry < to; entry++) {
      const grader = Math.floor(table.cell[entry] / GRADES.length)
      all[grader] += 1
      if (known) calibration[grader] += 1
    }
  }
  return { all, calibration, gradedCandidates }
}
