import type { CandidateWithVerdict } from '@/db/queries/consensus'
import { GRADES, type Answer } from '@/lib/science/agreement/grades'
import { decide } from '@/lib/science/agreement/mean-rule'
import type { MeanRuleInForce } from '@/lib/work/campaigns/rule-in-force'
import type { Judge, Judgement } from './judge'
import type { RunGrades } from './read-grades'

export function judgeByMean(rule: MeanRuleInForce, { table, cannotJudge }: RunGrades): Judge {
  return (row) => {
    const answers: { grade: Answer }[] = []
    for (let entry = table.start[row]; entry < table.start[row + 1]; entry++) {
      answers.push({ grade: GRADES[table.cell[entry] % GRADES.length] })
    }
    for (let unjudged = 0; unjudged < cannotJudge[row]; unjudged++) answers.push({ grade: 'U' })
    const { n: grades, reason, ...decision } = decide(rule, answers)
    const judgement: Judgement = { grades, ...decision, probability: null }
    return { judgement, reason: () => reason, differs: (before) => differs(judgement, reason, before) }
  }
}

function differs(judgement: Judgement, reason: string, before: CandidateWithVerdict): boolean {
  return (
    judgement.outcome !== before.outcome ||
    judgement.grades !== before.grades ||
    judgement.cannotJudge !== before.cannotJudge ||
    judgement.mean !== before.mean ||
    judgement.spread !== before.spread ||
    reason !== before.reason
  )
}
