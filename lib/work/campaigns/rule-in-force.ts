import 'server-only'
import type { Kysely } from 'kysely'
import { requireRule } from '@/db/queries/campaigns'
import type { DB } from '@/db/schema'
import type { MeanParameters, Rule } from '@/db/schema/campaigns'
import { fromJson } from '@/db/schema/values'
import type { MeanRule } from '@/lib/science/agreement/mean-rule'

export interface RuleInForce extends MeanRule {
  id: number
  version: number
}

export function ruleOf(row: Rule): RuleInForce {
  return {
    id: row.id,
    version: row.version,
    gradesWanted: row.grades_wanted,
    leastGrades: row.least_grades,
    ...(fromJson(row.parameters) as MeanParameters),
  }
}

/** The newest version of the campaign's rule. The caller holds a permit for the campaign. */
export async function ruleInForce(db: Kysely<DB>, campaignId: number): Promise<RuleInForce> {
  return ruleOf(await requireRule(db, campaignId))
}
