import type { Asker } from '@/db/queries/queue'

/** Whose queue it is, under the rule in force. By the reliability method a candidate wants looks only until it is settled. */
export function askerOf(
  campaignId: number,
  personId: number,
  rule: { method: 'mean' | 'reliability'; gradesWanted: number },
  now: string,
): Asker {
  return { campaignId, personId, gradesWanted: rule.gradesWanted, untilSettled: rule.method === 'reliability', now }
}
