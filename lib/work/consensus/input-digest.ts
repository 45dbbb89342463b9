import { createHash, type Hash } from 'node:crypto'
import type { CandidateOfRun, CountedAnswer } from '@/db/queries/consensus'
import type { RuleInForce } from '@/lib/work/campaigns/rule-in-force'

/**
 * SHA-256 over everything that a run's verdicts depend on, as UTF-8 text of one line each, every line ended by U+000A. By the mean:
 *
 *   ringside-consensus-input 1
 *   mean <grades wanted> <least grades> <mean that confirms> <mean that sets aside> <spread that splits>
 *   <candidate id> <person id> <A, B, C, N or U>     for every counted answer, by candidate and then person, ascending
 *
 * By the reliability method calibration stamps are in it, each with its truth before its answers, and who is left out:
 *
 *   ringside-consensus-input 2
 *   reliability <most looks> <least grades> <false confirmed> <missed lens>
 *   left out <person id> …                           ascending; nothing after the words where nobody is
 *   <candidate id> lens | not a lens                 for every calibration stamp with an answer, before these
 *
 * Where the campaign makes a first pass over the sheet, one line is between these and the answers; marks only grow, so that the newest
 * says which were read:
 *
 *   first pass <id of the newest mark>
 *
 * From what is in it the verdicts and the model follow. Candidates without an answer are not in it: nothing is said of them but
 * by the first pass, and how many there are, in a run's summary, which follows from its newest candidate.
 *
 * Numbers are written as JSON writes them. Repeats and answers of people who are left out are not in it, nor is an answer that was
 * corrected, so that a grade changed and changed back gives the same digest.
 */
export class InputDigest {
  readonly #hash: Hash = createHash('sha256')

  constructor(rule: RuleInForce, leftOut: readonly number[], newestSheetMarkId = 0) {
    this.#open(rule, leftOut)
    if (newestSheetMarkId > 0) this.#hash.update(`first pass ${newestSheetMarkId}\n`)
  }

  #open(rule: RuleInForce, leftOut: readonly number[]): void {
    const numbers = (values: readonly number[]) => values.map((n) => JSON.stringify(n)).join(' ')
    if (rule.method === 'mean') {
      const { gradesWanted, leastGrades, confirmMean, setAsideMean, splitSpread } = rule
      const line = numbers([gradesWanted, leastGrades, confirmMean, setAsideMean, splitSpread])
      this.#hash.update(`ringside-consensus-input 1\nmean ${line}\n`)
      return
    }
    const line = numbers([rule.mostLooks, rule.leastGrades, rule.falseConfirmed, rule.missedLens])
    const out = ['left out', ...leftOut].join(' ')
    this.#hash.update(`ringside-consensus-input 2\nreliability ${line}\n${out}\n`)
  }

  /** A page of candidates with their counted answers, both by candidate. */
  add(candidates: readonly CandidateOfRun[], answers: readonly CountedAnswer[]): void {
    const truths = new Map(candidates.flatMap(({ id, truth }) => (truth === null ? [] : [[id, truth] as const])))
    let text = ''
    let last = 0
    for (const { candidateId, personId, grade } of answers) {
      if (candidateId !== last && truths.has(candidateId)) text += `${candidateId} ${truths.get(candidateId)}\n`
      last = candidateId
      text += `${candidateId} ${personId} ${grade}\n`
    }
    this.#hash.update(text)
  }

  hex(): string {
    return this.#hash.digest('hex')
  }
}
