import 'server-only'
import { setImmediate as nextTurn } from 'node:timers/promises'
import type { RunModel } from '@/db/schema/consensus'
import type { DawidSkeneFit } from '@/lib/science/agreement/dawid-skene'
import { DawidSkeneModel } from '@/lib/science/agreement/dawid-skene-model'
import { UNKNOWN_TRUTH } from '@/lib/science/agreement/dawid-skene-options'
import { CANNOT_JUDGE, groupByCandidate } from '@/lib/science/agreement/grade-table'
import {
  LENS,
  LENS_MODEL,
  LENS_PSEUDO_COUNTS,
  lensShareWithPrior,
  NOT_A_LENS,
  ratesOfGraders,
  type GraderRates,
} from '@/lib/science/agreement/lens-model'
import { gradeWeight, logOddsOf } from '@/lib/science/agreement/posterior'
import type { GradeSheet } from './grade-sheet'

/** Whose reliabilities these are. */
type FitSource = 'run' | 'report'

export interface LensFit {
  source: FitSource
  converged: boolean
  /** share of lenses among the candidates of the search, calibration stamps left out */
  lensShare: number
  /** of each grader of the sheet, those who are left out too */
  rates: GraderRates[]
  /** log odds of each candidate by its grades, without what is known of its truth; grades of who is left out not counted */
  logOdds: Float64Array
  /** probability of a lens of each candidate: its truth where that is known */
  probability: Float64Array
  /** for `summariseGraders`: the counts of every grader against those probabilities */
  fit: DawidSkeneFit
}

const GRADES = 4
const CLASSES = 2
const TOLERANCE = 1e-6
const MOST_ITERATIONS = 500
const OUT_ITERATIONS = 20

/**
 * Reliabilities of the graders and probabilities of the candidates: by the newest run's model where it has one, else fitted
 * here, in turns, and kept nowhere. Who is left out decides nothing, and is measured against what the others' grades say.
 */
export async function fitLenses(
  sheet: GradeSheet,
  leftOut: ReadonlySet<number>,
  model: RunModel | null,
): Promise<LensFit> {
  const isOut = sheet.graders.map(({ personId }) => leftOut.has(personId))
  const included = Uint8Array.from(sheet.gradeOf, (grade, at) =>
    sheet.counts[at] && grade !== CANNOT_JUDGE && !isOut[sheet.graderOf[at]] ? 1 : 0,
  )
  const em = new DawidSkeneModel(
    groupByCandidate({
      candidates: sheet.candidates.length,
      graders: sheet.graders.length,
      grades: GRADES,
      candidateOf: sheet.candidateOf,
      graderOf: sheet.graderOf,
      gradeOf: Uint8Array.from(sheet.gradeOf, (grade, at) => (included[at] ? grade : CANNOT_JUDGE)),
    }),
    { ...LENS_MODEL, truth: sheet.truth, ...(model ? { from: startOf(sheet, model) } : {}) },
  )
  if (!model) em.maximise()
  let change = em.expect()
  for (let iteration = 1; !model && change >= TOLERANCE && iteration < MOST_ITERATIONS; iteration++) {
    await nextTurn()
    em.maximise()
    change = em.expect()
  }
  return finish(sheet, isOut, included, em, model ? model.converged : change < TOLERANCE, model ? 'run' : 'report')
}

/** The run's model as a start; who is not in it has the rates of a newcomer. */
function startOf(sheet: GradeSheet, model: RunModel) {
  const known = new Map(model.graders.map((grader) => [grader.personId, grader]))
  const confusion = sheet.graders.flatMap(({ personId }) => {
    const { lens, notLens } = known.get(personId) ?? model.newcomer
    return [...lens, ...notLens]
  })
  return { classShares: [model.lensShare, 1 - model.lensShare], confusion }
}

function finish(
  sheet: GradeSheet,
  isOut: readonly boolean[],
  included: Uint8Array,
  em: DawidSkeneModel,
  converged: boolean,
  source: FitSource,
): LensFit {
  const confusion = em.confusion()
  const counts = countsAgainst(sheet, em.posterior, isOut, confusion)
  const fit: DawidSkeneFit = {
    classes: CLASSES,
    grades: GRADES,
    graders: sheet.graders.length,
    classShares: em.shares,
    confusion,
    posterior: em.posterior,
    counts,
    logLikelihood: em.logLikelihood,
    logPosterior: em.logPosterior(),
    iterations: 0,
    converged,
    change: 0,
  }
  const rates = ratesOfGraders(fit)
  const lensShare =
    source === 'run' ? em.shares[LENS] : lensShareWithPrior(em.shares[LENS], countGraded(sheet, included))
  const logOdds = new Float64Array(sheet.candidates.length).fill(logOddsOf(lensShare))
  for (let at = 0; at < sheet.answers; at++) {
    if (included[at]) logOdds[sheet.candidateOf[at]] += gradeWeight(rates[sheet.graderOf[at]], sheet.gradeOf[at])
  }
  const probability = Float64Array.from(sheet.candidates, (_, candidate) =>
    sheet.truth[candidate] === UNKNOWN_TRUTH
      ? em.posterior[candidate * CLASSES + LENS]
      : Number(sheet.truth[candidate] === LENS),
  )
  return { source, converged, lensShare, rates, logOdds, probability, fit }
}

/** Candidates of the search with a grade that counts. */
function countGraded(sheet: GradeSheet, included: Uint8Array): number {
  const graded = new Set(sheet.candidateOf.filter((_, at) => included[at] === 1))
  return [...graded].filter((candidate) => sheet.truth[candidate] === UNKNOWN_TRUTH).length
}

/**
 * How often each grader met each class, as far as it is known, and gave each grade. Who is left out is fitted against the
 * others' posterior, which stays as it is; their rows of `confusion` are written.
 */
function countsAgainst(
  sheet: GradeSheet,
  posterior: Float64Array,
  isOut: readonly boolean[],
  confusion: Float64Array,
): Float64Array {
  const counts = new Float64Array(confusion.length)
  const out = [...isOut.keys()].filter((grader) => isOut[grader])
  for (const grader of out) smoothRows(counts, confusion, grader)
  for (let iteration = 0; iteration < (out.length > 0 ? OUT_ITERATIONS : 1); iteration++) {
    counts.fill(0)
    addCounts(sheet, posterior, isOut, confusion, counts)
    for (const grader of out) smoothRows(counts, confusion, grader)
  }
  return counts
}

function addCounts(
  sheet: GradeSheet,
  posterior: Float64Array,
  isOut: readonly boolean[],
  confusion: Float64Array,
  counts: Float64Array,
): void {
  for (let at = 0; at < sheet.answers; at++) {
    const grade = sheet.gradeOf[at]
    if (!sheet.counts[at] || grade === CANNOT_JUDGE) continue
    const grader = sheet.graderOf[at]
    const row = grader * CLASSES * GRADES + grade
    let lens = posterior[sheet.candidateOf[at] * CLASSES + LENS]
    let other = posterior[sheet.candidateOf[at] * CLASSES + NOT_A_LENS]
    if (isOut[grader]) {
      lens *= confusion[row + LENS * GRADES]
      other *= confusion[row + NOT_A_LENS * GRADES]
      const total = lens + other
      lens /= total
      other /= total
    }
    counts[row + LENS * GRADES] += lens
    counts[row + NOT_A_LENS * GRADES] += other
  }
}

/** The rates of a grader from their counts and the pseudo-counts of the model. */
function smoothRows(counts: Float64Array, confusion: Float64Array, grader: number): void {
  for (let c = 0; c < CLASSES; c++) {
    const from = (grader * CLASSES + c) * GRADES
    let total = 0
    for (let grade = 0; grade < GRADES; grade++) total += counts[from + grade] + LENS_PSEUDO_COUNTS[c * GRADES + grade]
    for (let grade = 0; grade < GRADES; grade++) {
      confusion[from + grade] = (counts[from + grade] + LENS_PSEUDO_COUNTS[c * GRADES + grade]) / total
    }
  }
}
