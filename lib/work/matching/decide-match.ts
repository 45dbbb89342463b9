import 'server-only'
import type { Kysely } from 'kysely'
import { findStandingMerge, insertDecision, listMembers } from '@/db/queries/merges'
import { findList } from '@/db/queries/reference-lists'
import type { DB } from '@/db/schema'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { isoTime } from '@/lib/platform/clock'
import { conflict, notFound } from '@/lib/platform/problems/problem'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { requireCandidate } from '@/lib/work/rulings/rule-on-candidate'
import type { DifferInput, ObjectInput } from './merge-input'

type Lead = CampaignPermit<'lead'>

/**
 * Says that candidates are different objects, each pair of them, so that they are proposed no more; 'undecided' proposes them again.
 * @throws Problem 404 where one is not here or is a calibration stamp; 409 `merged` where two of them are merged.
 */
export async function decideDifferent(
  db: Kysely<DB>,
  permit: Lead,
  { members, reason }: DifferInput,
  decision: 'different' | 'undecided' = 'different',
): Promise<{ names: string[] }> {
  const ids = [...new Set(members)]
  return db.transaction().execute(async (transaction) => {
    const found = await listMembers(transaction, permit.campaign.id, ids)
    if (found.length < ids.length || ids.length < 2) throw notFound('candidate')
    await assertNotMerged(transaction, ids)
    const now = isoTime()
    for (const [place, candidateId] of ids.entries()) {
      for (const otherId of ids.slice(place + 1)) {
        const { campaign, viewer } = permit
        const pair = { campaignId: campaign.id, personId: viewer.id, candidateId, about: { otherId } }
        await insertDecision(transaction, { ...pair, decision, reason, now })
      }
    }
    const names = found.map(({ name }) => name)
    await record(transaction, permit, names.join(', '), { members: ids, decision })
    return { names }
  })
}

async function assertNotMerged(db: Kysely<DB>, ids: readonly number[]): Promise<void> {
  for (const id of ids) {
    const merge = await findStandingMerge(db, id)
    if (merge && ids.includes(merge.keptId)) {
      throw conflict(
        'merged',
        `${merge.mergedName} is merged into ${merge.keptName}. Part the two before you say that they differ.`,
      )
    }
  }
}

/**
 * Says whether a candidate is the known object beside it: 'different' takes the label away, 'undecided' brings it back.
 * @throws Problem 404; 409 `calibration`.
 */
export async function decideObject(
  db: Kysely<DB>,
  permit: Lead,
  candidateId: number,
  input: ObjectInput,
): Promise<void> {
  const { list: listId, row: rowNumber, decision, reason } = input
  await db.transaction().execute(async (transaction) => {
    const candidate = await requireCandidate(transaction, permit, candidateId)
    if (candidate.truth !== null)
      throw conflict('calibration', `${candidate.name} is a calibration stamp and matches nothing.`)
    if (!(await findList(transaction, permit.campaign.id, listId))) throw notFound('list')
    const { campaign, viewer } = permit
    const about = { listId, rowNumber }
    const now = isoTime()
    const written = { campaignId: campaign.id, candidateId, about, decision, reason, personId: viewer.id, now }
    await insertDecision(transaction, written)
    await record(transaction, permit, candidate.name, { list: listId, row: rowNumber, decision })
  })
}

const record = (db: Kysely<DB>, { viewer, campaign }: Lead, subject: string, detail: Record<string, unknown>) =>
  recordEvent(db, { personId: viewer.id, campaignId: campaign.id, action: 'matching.decided', subject, detail })
