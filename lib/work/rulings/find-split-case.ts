import 'server-only'
import type { Kysely } from 'kysely'
import type { DB } from '@/db/schema'
import { Problem } from '@/lib/platform/problems/problem'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { candidateEvidence, type CandidateEvidence } from './candidate-evidence'
import type { Splits } from './list-splits'
import { whatWouldDecide } from './what-would-decide'

export interface FoundCase {
  evidence: CandidateEvidence | null
  decides: string[]
  /** A case was asked for that is not in this campaign. */
  missing: boolean
}

/** The case that was asked for, whatever its state, so that a ruling can be reversed; else the first split, if there is one. */
export async function findSplitCase(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  splits: Splits,
  asked: number | null,
): Promise<FoundCase> {
  const first = splits.cases.at(0)?.id ?? null
  const wanted = asked === null ? null : await evidenceOrNull(db, permit, asked)
  const evidence = wanted ?? (first === null ? null : await evidenceOrNull(db, permit, first))
  const { verdict, grades } = evidence?.judgement ?? {}
  return {
    evidence,
    decides: verdict?.rule.method === 'mean' && grades ? whatWouldDecide(verdict.rule, grades) : [],
    missing: asked !== null && wanted === null,
  }
}

async function evidenceOrNull(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  id: number,
): Promise<CandidateEvidence | null> {
  try {
    return await candidateEvidence(db, permit, id)
  } catch (error) {
    if (error instanceof Problem && error.status === 404) return null
    throw error
  }
}
