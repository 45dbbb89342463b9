import type { RunModel } from '@/db/schema/consensus'
import { UNKNOWN_TRUTH } from '@/lib/science/agreement/dawid-skene-options'
import { CANNOT_JUDGE, gradeCode } from '@/lib/science/agreement/grade-table'
import { GRADES, type Answer, type Grade } from '@/lib/science/agreement/grades'
import { LENS, NOT_A_LENS } from '@/lib/science/agreement/lens-model'
import type { RuleInForce } from '@/lib/work/campaigns/rule-in-force'
import { fitModel } from '@/lib/work/consensus/fit-model'
import { GrowingInts } from '@/lib/work/consensus/growing-ints'
import type { Judge } from '@/lib/work/consensus/judge'
import { judgeByMean } from '@/lib/work/consensus/judge-by-mean'
import { judgeByReliability } from '@/lib/work/consensus/judge-by-reliability'
import type { RunGrades } from '@/lib/work/consensus/read-grades'

/** How often a grader gave each grade, A to N, to calibration stamps of each truth. */
export interface CalibrationCounts {
  lens: readonly number[]
  notLens: readonly number[]
}

/**
 * What a release's verdicts are made of, in the order of its files: the counted answers of each candidate, and of calibration only
 * how often each grader gave each grade to what. A stamp's truth is known, so it adds one to each of its cells in the fit whoever
 * else graded it: counts are all of it that the reliabilities need.
 *
 * Whoever makes a release and whoever recomputes it go through here with the same numbers in the same order, so that both come to
 * the same probabilities to the last bit. They differ from those of the run itself by rounding only.
 */
export class ReleasedGrades {
  readonly #number: ReadonlyMap<string, number>
  readonly #parts = Array.from({ length: 6 }, () => new GrowingInts())

  /** @param graders pseudonyms in the order of `graders.csv`. */
  constructor(readonly graders: readonly string[]) {
    this.#number = new Map(graders.map((grader, index) => [grader, index]))
    this.#parts[4].push(0)
  }

  /** The next candidate's counted answers, in order of pseudonym. @throws RangeError on a grader who is none. */
  add(answers: readonly { by: string; grade: Answer }[]): void {
    const [, , , , , cell] = this.#parts
    let unjudged = 0
    for (const { by, grade } of answers) {
      const grader = this.#number.get(by)
      if (grader === undefined) throw new RangeError(`The grader ${by} is not in the list of graders.`)
      const code = gradeCode(grade)
      if (code === CANNOT_JUDGE) unjudged += 1
      else cell.push(grader * GRADES.length + code)
    }
    this.#close(UNKNOWN_TRUTH, unjudged)
  }

  /** After the last candidate. Each calibration grade is a stamp of its own. */
  addCalibration(counts: readonly CalibrationCounts[]): void {
    const cell = this.#parts[5]
    counts.forEach(({ lens, notLens }, grader) => {
      for (const [truth, row] of [
        [LENS, lens],
        [NOT_A_LENS, notLens],
      ] as const) {
        row.forEach((count, grade) => {
          for (let n = 0; n < count; n++) {
            cell.push(grader * GRADES.length + grade)
            this.#close(truth, 0)
          }
        })
      }
    })
  }

  #close(truth: number, unjudged: number): void {
    const [ids, truths, cannotJudge, newest, start, cell] = this.#parts
    ids.push(ids.length + 1)
    truths.push(truth)
    cannotJudge.push(unjudged)
    newest.push(0)
    start.push(cell.length)
  }

  taken(): RunGrades {
    const [ids, truth, cannotJudge, newestAnswer, start, cell] = this.#parts.map((part) => part.taken())
    const people = this.graders.map((_, index) => index)
    const table = { candidates: ids.length, graders: people.length, grades: GRADES.length, start, cell }
    return { ids, truth, cannotJudge, newestAnswer, people, peopleAtCandidates: new Set(people), table }
  }
}

export interface ReleasedJudge {
  /** Of the reliability method; graders by their place in the list of graders. */
  model: RunModel | null
  /** By place among the candidates, from 0. */
  judge: Judge
}

/** Fits the reliabilities where the rule goes by them, and decides by the rule. */
export async function judgeReleased(rule: RuleInForce, released: ReleasedGrades): Promise<ReleasedJudge> {
  const grades = released.taken()
  if (rule.method === 'mean') return { model: null, judge: judgeByMean(rule, grades) }
  const model = await fitModel(grades, [])
  return { model, judge: judgeByReliability(rule, grades, model, (place) => released.graders[place]) }
}

export const emptyCounts = (): Record<Grade, number> => ({ A: 0, B: 0, C: 0, N: 0 })
