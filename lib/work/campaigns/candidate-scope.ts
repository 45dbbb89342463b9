import type { CandidateScope } from '@/db/queries/catalogue'
import type { CampaignPermit } from '@/lib/work/people/permission'

/**
 * What a list of candidates holds for whom.
 *
 * | role | calibration candidates | verdict, state, votes |
 * | --- | --- | --- |
 * | lead | listed and marked | of all |
 * | viewer | not listed: to them they are not part of the search | of all |
 * | grader | listed like any other, without a mark | of those that they have judged |
 *
 * A grader must not learn from a list which candidates are calibration: so there they are among the others, and before the
 * grader's own grade all look alike. Afterwards one looks like a candidate that nothing has decided yet: graders are told no verdict
 * that leaves one open, and of a calibration stamp no grade but their own and those of people who wrote in its discussion.
 */
export function candidateScope(permit: CampaignPermit<'read'>): CandidateScope {
  return {
    campaignId: permit.campaign.id,
    withCalibration: permit.role !== 'viewer',
    judgedBy: permit.role === 'grader' ? permit.viewer.id : null,
  }
}
