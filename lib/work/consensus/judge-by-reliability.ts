import type { CandidateWithVerdict } from '@/db/queries/consensus'
import type { RunModel } from '@/db/schema/consensus'
import { GRADE_POINTS, GRADES, meanAndSpread } from '@/lib/science/agreement/grades'
import { probabilityOf } from '@/lib/science/agreement/posterior'
import { decideByReliability, type ReliabilityAnswer } from '@/lib/science/agreement/reliability-rule'
import { waldBoundaries } from '@/lib/science/agreement/sequential-test'
import type { ReliabilityRuleInForce } from '@/lib/work/campaigns/rule-in-force'
import { outcomeOf, ratesIn, readyModel, sumOfWeights, weightIn } from '@/lib/work/queue/lens-estimate'
import type { Judge, Judgement } from './judge'
import type { RunGrades } from './read-grades'

/**
 * Each run moves every probability a little, because the reliabilities move. A verdict that says the same of the same answers is
 * written anew only where its probability moved by this much; until then the one that stands is explained by its own run's model.
 */
const NOTABLE = 0.01

/** @param nameOf what a reason calls a person: the pseudonym, because reasons leave the house with exports. */
export function judgeByReliability(
  rule: ReliabilityRuleInForce,
  { table, people, cannotJudge, newestAnswer }: RunGrades,
  model: RunModel,
  nameOf: (personId: number) => string,
): Judge {
  const ready = readyModel(model)
  const boundaries = waldBoundaries(rule)
  const weightOf = people.flatMap((personId) => GRADES.map((_, grade) => weightIn(ready, personId, grade)))
  const raters = people.map((personId) => ({ rates: ratesIn(ready, personId), grader: nameOf(personId) }))
  const unjudged: ReliabilityAnswer = { grade: 'U', rates: model.newcomer, grader: '' }

  const answersOf = (row: number): ReliabilityAnswer[] => {
    const answers: ReliabilityAnswer[] = []
    for (let entry = table.start[row]; entry < table.start[row + 1]; entry++) {
      const cell = table.cell[entry]
      answers.push({ grade: GRADES[cell % GRADES.length], ...raters[Math.floor(cell / GRADES.length)] })
    }
    for (let look = 0; look < cannotJudge[row]; look++) answers.push(unjudged)
    return answers
  }

  return (row) => {
    const cells = table.cell.subarray(table.start[row], table.start[row + 1])
    const evidence = sumOfWeights(Array.from(cells, (cell) => weightOf[cell]))
    const looks = cells.length + cannotJudge[row]
    const { mean, spread } = meanAndSpread(Array.from(cells, (cell) => GRADE_POINTS[GRADES[cell % GRADES.length]]))
    const judgement: Judgement = {
      outcome: outcomeOf(rule, boundaries, { grades: cells.length, looks, evidence }),
      grades: cells.length,
      cannotJudge: cannotJudge[row],
      mean,
      spread,
      probability: probabilityOf(ready.prior + evidence),
    }
    return {
      judgement,
      reason: () => decideByReliability(rule, answersOf(row), model.lensShare).reason,
      differs: (before) => differs(judgement, before, rule.id, newestAnswer[row]),
    }
  }
}

function differs(judgement: Judgement, before: CandidateWithVerdict, ruleId: number, newestAnswer: number): boolean {
  return (
    judgement.outcome !== before.outcome ||
    judgement.grades !== before.grades ||
    judgement.cannotJudge !== before.cannotJudge ||
    ruleId !== before.ruleId ||
    newestAnswer > (before.newestGradeId ?? 0) ||
    before.probability === null ||
    judgement.probability === null ||
    Math.abs(judgement.probability - before.probability) >= NOTABLE
  )
}
