import type { Asker } from '@/db/queries/queue'

/** Whose queue it is, under the rule in force. By the reliability method a candidate wants looks only until it is settled. */
export function askerOf(
  campaign: { id: number; uses_sheet: 0 | 1 },
  personId: number,
  rule: { method: 'mean' | 'reliability'; gradesWanted: number },
  now: string,
): Asker {
  return {
    campaignId: campaign.id,
    personId,
    gradesWanted: rule.gradesWanted,
    untilSettled: rule.method === 'reliability',
    usesSheet: campaign.uses_sheet === 1,
    now,
  }
}
