import 'server-only'
import type { Kysely } from 'kysely'
import { requireRule } from '@/db/queries/campaigns'
import type { DB } from '@/db/schema'
import type { MeanParameters, ReliabilityParameters, Rule } from '@/db/schema/campaigns'
import { fromJson } from '@/db/schema/values'
import type { MeanRule } from '@/lib/science/agreement/mean-rule'
import type { ReliabilityRule } from '@/lib/science/agreement/reliability-rule'

interface RuleIdentity {
  id: number
  version: number
}

export interface MeanRuleInForce extends MeanRule, RuleIdentity {
  method: 'mean'
}

export interface ReliabilityRuleInForce extends ReliabilityRule, RuleIdentity {
  method: 'reliability'
  /** The same number as `mostLooks`, by the name that both methods share. */
  gradesWanted: number
}

/** What every method has: `gradesWanted`, the looks that a candidate gets at most, and `leastGrades`. */
export type RuleInForce = MeanRuleInForce | ReliabilityRuleInForce

export function ruleOf(row: Rule): RuleInForce {
  const { id, version, grades_wanted: gradesWanted, least_grades: leastGrades } = row
  const common = { id, version, gradesWanted, leastGrades }
  return row.method === 'mean'
    ? { method: 'mean', ...common, ...(fromJson(row.parameters) as MeanParameters) }
    : {
        method: 'reliability',
        ...common,
        mostLooks: gradesWanted,
        ...(fromJson(row.parameters) as ReliabilityParameters),
      }
}

/** The newest version of the campaign's rule. The caller holds a permit for the campaign. */
export async function ruleInForce(db: Kysely<DB>, campaignId: number): Promise<RuleInForce> {
  return ruleOf(await requireRule(db, campaignId))
}
