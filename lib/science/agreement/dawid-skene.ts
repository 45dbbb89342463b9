/**
 * Reliability of graders and probability of each class of each candidate, without knowing the truth: the EM algorithm of
 * A. P. Dawid & A. M. Skene (1979), Applied Statistics 28, 20, equations 2.3 to 2.5, started from vote shares (3.1).
 *
 *   E: T_ic  is proportional to  p_c * product over the grades l that grader k gave candidate i of  pi_k(c, l)
 *   M: pi_k(c, l) = (a_cl + sum of T_ic over k's grades l) / (sum over l of the same)
 *      p_c = mean of T_ic over the graded candidates of unknown truth
 * with pseudo-counts a, which keep every probability above zero (a Dirichlet prior with a + 1: EM then climbs the log
 * posterior, reported beside the log-likelihood). Where the truth is known (calibration stamps) T is that truth and stays.
 * Known truths do not enter the shares, because calibration stamps are chosen, not drawn from the search.
 *
 * Classes and grades may differ in number: two classes (lens, not a lens) under four grades is the product's model. The
 * model takes grades of one candidate as independent given its class. EM finds one local maximum: the one uphill from
 * the start. Cost O(grades * classes) an iteration; memory one number a class and candidate beyond the grades.
 */
import { DawidSkeneModel } from '@/lib/science/agreement/dawid-skene-model'
import type { DawidSkeneOptions } from '@/lib/science/agreement/dawid-skene-options'
import type { GradesByCandidate } from '@/lib/science/agreement/grade-table'

export interface DawidSkeneFit {
  classes: number
  grades: number
  graders: number
  /** p_c */
  classShares: Float64Array
  /** pi: probability of each grade for each class and grader, at (grader * classes + class) * grades + grade */
  confusion: Float64Array
  /** T: at candidate * classes + class; the class shares for a candidate without grade */
  posterior: Float64Array
  /** expected number of times the grader met the class and gave the grade, laid out like confusion, without pseudo-counts */
  counts: Float64Array
  /** natural log of the probability of the grades (given the truth, where known), without multinomial coefficients */
  logLikelihood: number
  /** that plus sum of a_cl ln pi_k(c, l), which no iteration lowers */
  logPosterior: number
  iterations: number
  converged: boolean
  /** largest change of a posterior in the last iteration */
  change: number
}

/**
 * @param table grades grouped by candidate. No grades at all are allowed: shares then are the start's.
 * @throws RangeError on options outside their domain, named in the message.
 */
export function fitDawidSkene(table: GradesByCandidate, options: DawidSkeneOptions): DawidSkeneFit {
  const model = new DawidSkeneModel(table, options)
  const { tolerance = 1e-6, maxIterations = 1000 } = options
  if (!options.from) model.maximise()
  let change = Infinity
  let iterations = 0
  while (iterations < maxIterations) {
    if (iterations > 0) model.maximise()
    change = model.expect()
    iterations += 1
    const { logLikelihood } = model
    options.onIteration?.({ iteration: iterations, change, logLikelihood, logPosterior: model.logPosterior() })
    if (change < tolerance) break
  }
  return {
    classes: model.classes,
    grades: table.grades,
    graders: table.graders,
    classShares: model.shares,
    confusion: model.confusion(),
    posterior: model.posterior,
    counts: model.counts(),
    logLikelihood: model.logLikelihood,
    logPosterior: model.logPosterior(),
    iterations,
    converged: change < tolerance,
    change,
  }
}
