import 'server-only'
import type { Kysely } from 'kysely'
import type { DB } from '@/db/schema'
import { Problem } from '@/lib/platform/problems/problem'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { candidateNames } from './candidate-name'
import { ruleOnCandidate, type RulingAnswer } from './rule-on-candidate'
import type { GroupRuling } from './group-input'

export interface GroupOutcome {
  ruled: ({ candidateId: number; name: string } & RulingAnswer)[]
  /** Those that kept their state, each with the sentence that says why. */
  refused: { candidateId: number; name: string; reason: string }[]
}

/**
 * One ruling with one reason on several candidates. Each is ruled in a transaction of its own with its own check that nobody
 * has ruled meanwhile, so that what is refused of one keeps none of the others; the answer tells of each.
 */
export async function ruleOnSeveral(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  { cases, outcome, grade, reason }: GroupRuling,
): Promise<GroupOutcome> {
  const names = await candidateNames(
    db,
    permit,
    cases.map(({ candidateId }) => candidateId),
  )
  const result: GroupOutcome = { ruled: [], refused: [] }
  for (const { candidateId, lastRulingSeen } of cases) {
    const name = names.get(candidateId) ?? 'a candidate that is not here'
    try {
      const ruling = { outcome, grade, reason, lastRulingSeen }
      result.ruled.push({ candidateId, name, ...(await ruleOnCandidate(db, permit, candidateId, ruling)) })
    } catch (error) {
      if (!(error instanceof Problem)) throw error
      result.refused.push({ candidateId, name, reason: error.message })
    }
  }
  return result
}
