/**
 * The two steps of the EM algorithm of Dawid & Skene (1979), equations 2.3 to 2.5, on flat tables.
 *
 * Tables are laid out grader, grade, class, so that a grade finds its classes side by side, and padded to four classes
 * (of share 0), so that the usual few run without a loop over classes. Probabilities are multiplied as they are; where
 * the product comes near underflow, as with hundreds of grades of one candidate, the candidate is done again in logs.
 */
import {
  checkDawidSkeneOptions,
  UNKNOWN_TRUTH,
  type DawidSkeneOptions,
} from '@/lib/science/agreement/dawid-skene-options'
import type { GradesByCandidate } from '@/lib/science/agreement/grade-table'

/** Products below this are taken in logs: 1e-250 leaves 16 digits to spare above the smallest normal double, 2e-308. */
const NEAR_UNDERFLOW = 1e-250
const UNROLLED = 4

export class DawidSkeneModel {
  readonly classes: number
  readonly shares: Float64Array
  readonly posterior: Float64Array
  logLikelihood = -Infinity
  /** sums of posteriors in each cell: all that the M step needs of the grades */
  private readonly sums: Float64Array
  private readonly rates: Float64Array
  private readonly logRates: Float64Array
  private readonly stride: number
  private readonly pseudo: Float64Array
  private readonly shareSums: Float64Array
  private readonly fixedShares: boolean
  private readonly term: Float64Array

  constructor(
    private readonly table: GradesByCandidate,
    private readonly options: DawidSkeneOptions,
  ) {
    checkDawidSkeneOptions(table, options)
    const { candidates, graders, grades } = table
    const { classes, pseudoCounts, shares } = options
    this.classes = classes
    this.stride = Math.max(classes, UNROLLED)
    this.posterior = new Float64Array(candidates * classes)
    this.sums = new Float64Array(graders * grades * this.stride)
    this.rates = new Float64Array(this.sums.length)
    this.logRates = new Float64Array(this.sums.length)
    this.shareSums = new Float64Array(this.stride)
    this.term = new Float64Array(classes)
    this.pseudo = Float64Array.from({ length: classes * grades }, (_, at) =>
      typeof pseudoCounts === 'number' ? pseudoCounts : pseudoCounts[at],
    )
    this.fixedShares = shares !== 'estimated'
    this.shares = shares === 'estimated' ? new Float64Array(classes).fill(1 / classes) : Float64Array.from(shares)
    this.startFromVotes()
    if (options.from) this.startFromFit(options.from)
  }

  private startFromVotes(): void {
    const { classes, posterior, table, options } = this
    const { startOfGrade, truth } = options
    for (let candidate = 0; candidate < table.candidates; candidate++) {
      const known = truth ? truth[candidate] : UNKNOWN_TRUTH
      const from = table.start[candidate]
      const to = table.start[candidate + 1]
      const at = candidate * classes
      if (known !== UNKNOWN_TRUTH) posterior[at + known] = 1
      else if (!options.from) {
        for (let entry = from; entry < to; entry++) {
          const grade = table.cell[entry] % table.grades
          if (!startOfGrade) posterior[at + grade] += 1 / (to - from)
          else for (let c = 0; c < classes; c++) posterior[at + c] += startOfGrade[grade * classes + c] / (to - from)
        }
        if (to > from) for (let c = 0; c < classes; c++) this.shareSums[c] += posterior[at + c]
      }
      this.gather(from, to, at)
    }
  }

  private startFromFit(from: NonNullable<DawidSkeneOptions['from']>): void {
    const { classes, table, stride } = this
    if (!this.fixedShares) this.shares.set(Array.from(from.classShares))
    for (let row = 0; row < table.graders * table.grades; row++) {
      const grader = Math.floor(row / table.grades)
      for (let c = 0; c < classes; c++) {
        const rate = from.confusion[(grader * classes + c) * table.grades + (row % table.grades)]
        this.rates[row * stride + c] = rate
        this.logRates[row * stride + c] = Math.log(rate)
      }
    }
  }

  /** M step: shares and confusion from the sums. A row without any count, pseudo-counts included, is uniform. */
  maximise(): void {
    const { classes, sums, pseudo, table, shares, shareSums, stride } = this
    const graded = shareSums.reduce((sum, value) => sum + value, 0)
    if (!this.fixedShares && graded > 0) for (let c = 0; c < classes; c++) shares[c] = shareSums[c] / graded
    for (let grader = 0; grader < table.graders; grader++) {
      const first = grader * table.grades * stride
      for (let c = 0; c < classes; c++) {
        let total = 0
        for (let grade = 0; grade < table.grades; grade++) {
          total += sums[first + grade * stride + c] + pseudo[c * table.grades + grade]
        }
        for (let grade = 0; grade < table.grades; grade++) {
          const at = first + grade * stride + c
          const count = sums[at] + pseudo[c * table.grades + grade]
          this.rates[at] = total > 0 ? count / total : 1 / table.grades
          this.logRates[at] = Math.log(this.rates[at])
        }
      }
    }
  }

  /** E step, which also gathers the sums for the next M step. @returns the largest change of a posterior */
  expect(): number {
    this.sums.fill(0)
    this.shareSums.fill(0)
    this.logLikelihood = 0
    return this.classes <= UNROLLED ? this.expectFew() : this.expectRange(0, this.table.candidates)
  }

  /** Up to four classes. Any candidate that is not plain is left to expectRange. */
  private expectFew(): number {
    const { classes, posterior, sums, rates, shares, shareSums } = this
    const { start, cell, candidates } = this.table
    const truth = this.options.truth
    const [share0, share1 = 0, share2 = 0, share3 = 0] = shares
    let change = 0
    let logLikelihood = 0
    for (let candidate = 0; candidate < candidates; candidate++) {
      const from = start[candidate]
      const to = start[candidate + 1]
      let t0 = share0
      let t1 = share1
      let t2 = share2
      let t3 = share3
      for (let entry = from; entry < to; entry++) {
        const row = cell[entry] * UNROLLED
        t0 *= rates[row]
        t1 *= rates[row + 1]
        t2 *= rates[row + 2]
        t3 *= rates[row + 3]
      }
      const total = t0 + t1 + t2 + t3
      if (from === to || !(total > NEAR_UNDERFLOW) || (truth && truth[candidate] !== UNKNOWN_TRUTH)) {
        change = Math.max(change, this.expectRange(candidate, candidate + 1))
        continue
      }
      const scale = 1 / total
      t0 *= scale
      t1 *= scale
      t2 *= scale
      t3 *= scale
      for (let entry = from; entry < to; entry++) {
        const row = cell[entry] * UNROLLED
        sums[row] += t0
        sums[row + 1] += t1
        sums[row + 2] += t2
        sums[row + 3] += t3
      }
      shareSums[0] += t0
      shareSums[1] += t1
      shareSums[2] += t2
      shareSums[3] += t3
      const at = candidate * classes
      change = Math.max(change, Math.abs(t0 - posterior[at]))
      posterior[at] = t0
      if (classes > 1) {
        change = Math.max(change, Math.abs(t1 - posterior[at + 1]))
        posterior[at + 1] = t1
      }
      if (classes > 2) {
        change = Math.max(change, Math.abs(t2 - posterior[at + 2]))
        posterior[at + 2] = t2
      }
      if (classes > 3) {
        change = Math.max(change, Math.abs(t3 - posterior[at + 3]))
        posterior[at + 3] = t3
      }
      logLikelihood += Math.log(total)
    }
    this.logLikelihood += logLikelihood
    return change
  }

  /** Any candidates, in logs: known truths, no grades, any number of grades and classes. */
  private expectRange(first: number, beyond: number): number {
    const { classes, posterior, logRates, shares, shareSums, stride, term } = this
    const { start, cell } = this.table
    const truth = this.options.truth
    let change = 0
    for (let candidate = first; candidate < beyond; candidate++) {
      const from = start[candidate]
      const to = start[candidate + 1]
      const at = candidate * classes
      const known = truth ? truth[candidate] : UNKNOWN_TRUTH
      term.fill(0)
      for (let entry = from; entry < to; entry++) {
        const row = cell[entry] * stride
        for (let c = 0; c < classes; c++) term[c] += logRates[row + c]
      }
      if (known !== UNKNOWN_TRUTH) this.logLikelihood += term[known]
      else {
        let highest = -Infinity
        for (let c = 0; c < classes; c++) {
          term[c] += Math.log(shares[c])
          if (term[c] > highest) highest = term[c]
        }
        let total = 0
        // Grades that no class can give leave the shares as they are: -Infinity less itself is not a number.
        for (let c = 0; c < classes; c++) {
          term[c] = highest === -Infinity ? shares[c] : Math.exp(term[c] - highest)
          total += term[c]
        }
        for (let c = 0; c < classes; c++) {
          const value = term[c] / total
          // One without a grade follows the shares and says nothing of its own, not even that the fit still moves.
          if (to > from) {
            change = Math.max(change, Math.abs(value - posterior[at + c]))
            shareSums[c] += value
          }
          posterior[at + c] = value
        }
        if (to > from) this.logLikelihood += highest + Math.log(total)
      }
      this.gather(from, to, at)
    }
    return change
  }

  private gather(from: number, to: number, at: number): void {
    const { classes, sums, posterior, stride, table } = this
    for (let entry = from; entry < to; entry++) {
      const row = table.cell[entry] * stride
      for (let c = 0; c < classes; c++) sums[row + c] += posterior[at + c]
    }
  }

  logPosterior(): number {
    const { classes, pseudo, logRates, table, stride } = this
    let sum = this.logLikelihood
    for (let row = 0; row < table.graders * table.grades; row++) {
      for (let c = 0; c < classes; c++) {
        const count = pseudo[c * table.grades + (row % table.grades)]
        if (count > 0) sum += count * logRates[row * stride + c]
      }
    }
    return sum
  }

  /** Rates laid out grader, class, grade. */
  confusion(): Float64Array {
    return this.byClass(this.rates)
  }

  /** Sums of posteriors laid out grader, class, grade. */
  counts(): Float64Array {
    return this.byClass(this.sums)
  }

  private byClass(values: Float64Array): Float64Array {
    const { classes, table, stride } = this
    return Float64Array.from({ length: table.graders * classes * table.grades }, (_, at) => {
      const grade = at % table.grades
      const row = Math.floor(at / table.grades)
      return values[(Math.floor(row / classes) * table.grades + grade) * stride + (row % classes)]
    })
  }
}
