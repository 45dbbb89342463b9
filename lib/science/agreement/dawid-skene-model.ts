/** The two steps of the EM algorithm of Dawid & Skene (1979), equations 2.3 to 2.5, on flat tables. */
import {
  checkDawidSkeneOptions,
  UNKNOWN_TRUTH,
  type DawidSkeneOptions,
} from '@/lib/science/agreement/dawid-skene-options'
import type { GradesByCandidate } from '@/lib/science/agreement/grade-table'

/** The state between two steps. Tables are laid out grader, grade, class, so that a grade finds its classes in a row. */
export class DawidSkeneModel {
  readonly classes: number
  readonly shares: Float64Array
  readonly posterior: Float64Array
  /** sums of posteriors in each cell: all that the M step needs of the grades */
  readonly sums: Float64Array
  logLikelihood = -Infinity
  private readonly logRates: Float64Array
  private readonly pseudo: Float64Array
  private readonly shareSums: Float64Array
  private readonly fixedShares: boolean

  constructor(
    private readonly table: GradesByCandidate,
    private readonly options: DawidSkeneOptions,
  ) {
    const { candidates, graders, grades } = table
    const { classes } = options
    checkDawidSkeneOptions(table, options)
    this.classes = classes
    this.posterior = new Float64Array(candidates * classes)
    this.sums = new Float64Array(graders * grades * classes)
    this.logRates = new Float64Array(graders * grades * classes)
    this.shareSums = new Float64Array(classes)
    const { pseudoCounts, shares } = options
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
      for (let entry = from; entry < to; entry++) {
        const cell = table.cell[entry] * classes
        for (let c = 0; c < classes; c++) this.sums[cell + c] += posterior[at + c]
      }
    }
  }

  private startFromFit(from: NonNullable<DawidSkeneOptions['from']>): void {
    const { classes, table } = this
    if (!this.fixedShares) this.shares.set(Array.from(from.classShares))
    for (let grader = 0; grader < table.graders; grader++) {
      for (let c = 0; c < classes; c++) {
        for (let grade = 0; grade < table.grades; grade++) {
          const rate = from.confusion[(grader * classes + c) * table.grades + grade]
          this.logRates[(grader * table.grades + grade) * classes + c] = Math.log(rate)
        }
      }
    }
  }

  /** M step: shares and confusion from the sums. A row without any count, pseudo-counts included, is uniform. */
  maximise(): void {
    const { classes, sums, pseudo, logRates, table, shares, shareSums } = this
    const graded = shareSums.reduce((sum, value) => sum + value, 0)
    if (!this.fixedShares && graded > 0) for (let c = 0; c < classes; c++) shares[c] = shareSums[c] / graded
    for (let grader = 0; grader < table.graders; grader++) {
      const first = grader * table.grades * classes
      for (let c = 0; c < classes; c++) {
        let total = 0
        for (let grade = 0; grade < table.grades; grade++) {
          total += sums[first + grade * classes + c] + pseudo[c * table.grades + grade]
        }
        for (let grade = 0; grade < table.grades; grade++) {
          const count = sums[first + grade * classes + c] + pseudo[c * table.grades + grade]
          logRates[first + grade * classes + c] = Math.log(total > 0 ? count / total : 1 / table.grades)
        }
      }
    }
  }

  /** E step, which also gathers the sums for the next M step. @returns the largest change of a posterior */
  expect(): number {
    const { classes, posterior, sums, logRates, shareSums } = this
    const { start, cell, candidates } = this.table
    const { truth } = this.options
    const logShares = this.shares.map(Math.log)
    const log = new Float64Array(classes)
    sums.fill(0)
    shareSums.fill(0)
    let change = 0
    let logLikelihood = 0
    for (let candidate = 0; candidate < candidates; candidate++) {
      const from = start[candidate]
      const to = start[candidate + 1]
      const at = candidate * classes
      const known = truth ? truth[candidate] : UNKNOWN_TRUTH
      for (let c = 0; c < classes; c++) log[c] = logShares[c]
      for (let entry = from; entry < to; entry++) {
        const row = cell[entry] * classes
        for (let c = 0; c < classes; c++) log[c] += logRates[row + c]
      }
      if (known === UNKNOWN_TRUTH) {
        let highest = log[0]
        for (let c = 1; c < classes; c++) if (log[c] > highest) highest = log[c]
        let total = 0
        // Grades that no class can give leave the shares as they are: -Infinity less itself is not a number.
        for (let c = 0; c < classes; c++) {
          log[c] = highest === -Infinity ? this.shares[c] : Math.exp(log[c] - highest)
          total += log[c]
        }
        for (let c = 0; c < classes; c++) {
          const value = log[c] / total
          const moved = Math.abs(value - posterior[at + c])
          if (moved > change) change = moved
          posterior[at + c] = value
          if (to > from) shareSums[c] += value
        }
        if (to > from) logLikelihood += highest + Math.log(total)
      } else if (to > from) logLikelihood += log[known] - logShares[known]
      for (let entry = from; entry < to; entry++) {
        const row = cell[entry] * classes
        for (let c = 0; c < classes; c++) sums[row + c] += posterior[at + c]
      }
    }
    this.logLikelihood = logLikelihood
    return change
  }

  logPosterior(): number {
    const { classes, pseudo, logRates, table } = this
    let sum = this.logLikelihood
    for (let row = 0; row < table.graders * table.grades; row++) {
      for (let c = 0; c < classes; c++) {
        const count = pseudo[c * table.grades + (row % table.grades)]
        if (count > 0) sum += count * logRates[row * classes + c]
      }
    }
    return sum
  }

  confusion(): Float64Array {
    return this.byClass(this.logRates.map(Math.exp))
  }

  /** From the layout grader, grade, class to grader, class, grade. */
  byClass(values: Float64Array): Float64Array {
    const { classes, table } = this
    return Float64Array.from({ length: values.length }, (_, at) => {
      const grade = at % table.grades
      const row = Math.floor(at / table.grades)
      return values[(Math.floor(row / classes) * table.grades + grade) * classes + (row % classes)]
    })
  }
}
