import { createHash, type Hash } from 'node:crypto'
import type { CountedAnswer } from '@/db/queries/consensus'
import type { MeanRule } from '@/lib/science/agreement/mean-rule'

/**
 * SHA-256 over everything that a run's verdicts depend on, as UTF-8 text of one line each, every line ended by U+000A:
 *
 *   ringside-consensus-input 1
 *   mean <grades wanted> <least grades> <mean that confirms> <mean that sets aside> <spread that splits>
 *   <candidate id> <person id> <A, B, C, N or U>     for every counted answer, by candidate and then person, ascending
 *
 * Numbers are written as JSON writes them. Calibration candidates and repeats are not in it, nor is an answer that was
 * corrected, so that a grade changed and changed back gives the same digest.
 */
export class InputDigest {
  readonly #hash: Hash = createHash('sha256')

  constructor(rule: MeanRule) {
    const numbers = [rule.gradesWanted, rule.leastGrades, rule.confirmMean, rule.setAsideMean, rule.splitSpread]
    this.#hash.update(`ringside-consensus-input 1\nmean ${numbers.map((n) => JSON.stringify(n)).join(' ')}\n`)
  }

  add(answers: readonly CountedAnswer[]): void {
    let text = ''
    for (const { candidateId, personId, grade } of answers) text += `${candidateId} ${personId} ${grade}\n`
    this.#hash.update(text)
  }

  hex(): string {
    return this.#hash.digest('hex')
  }
}
