import 'server-only'
import type { Kysely } from 'kysely'
import { insertJudgementsShown, listCandidatesAmong, listJudgedAmong } from '@/db/queries/grading'
import type { DB } from '@/db/schema'
import { isoTime } from '@/lib/platform/clock'
import type { CampaignPermit } from '@/lib/work/people/permission'

/**
 * Of which of these candidates the person may see grades, verdict and state. Leads and viewers: of all in the campaign. A
 * grader: of those they have judged themselves, so that nobody is swayed. 'Cannot judge' is no judgement: it reveals nothing,
 * or a look at the others' grades would cost one key. While a lead waits for another look of theirs it is withheld again, so that
 * this look is their own too. Ids of other campaigns are never in the answer.
 */
export async function revealedTo(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  candidateIds: readonly number[],
): Promise<Set<number>> {
  if (candidateIds.length === 0) return new Set()
  const { campaign, viewer, role } = permit
  return new Set(
    role === 'grader'
      ? await listJudgedAmong(db, campaign.id, viewer.id, candidateIds)
      : await listCandidatesAmong(db, campaign.id, candidateIds),
  )
}

/**
 * Notes what a grader is being shown of the others' judgement, before it leaves the server: from then on their own grade of these
 * candidates stands as they gave it. Leads and viewers see everything by their role, so nothing is noted for them.
 */
export async function noteShown(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  candidateIds: readonly number[],
): Promise<void> {
  if (permit.role !== 'grader' || candidateIds.length === 0) return
  const { campaign, viewer } = permit
  await insertJudgementsShown(db, { campaignId: campaign.id, personId: viewer.id, candidateIds, now: isoTime() })
}

/** Notes that a grader is being told of the others' judgement by somebody else, as by a mail that carries what they wrote. */
export async function noteTold(
  db: Kysely<DB>,
  campaignId: number,
  grader: { personId: number },
  candidateId: number,
): Promise<void> {
  const { personId } = grader
  await insertJudgementsShown(db, { campaignId, personId, candidateIds: [candidateId], now: isoTime() })
}
