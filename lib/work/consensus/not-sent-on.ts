import 'server-only'
import type { Kysely } from 'kysely'
import { listPseudonyms } from '@/db/queries/consensus'
import { listStandingMarks } from '@/db/queries/sheet'
import type { DB } from '@/db/schema'
import { firstPassOf, notSentOnReason } from '@/lib/work/sheet/first-pass'
import type { Judged } from './judge'

/** Why candidates are set aside that the first pass did not send on, by candidate; none where the campaign makes no first pass. */
export async function readNotSentOn(
  db: Kysely<DB>,
  { campaignId, newestSheetMarkId = 0 }: { campaignId: number; newestSheetMarkId?: number },
  range: { from: number; to: number },
): Promise<Map<number, string>> {
  const reasons = new Map<number, string>()
  if (newestSheetMarkId === 0) return reasons
  const marks = await listStandingMarks(db, range, newestSheetMarkId)
  if (marks.length === 0) return reasons
  const pseudonyms = await listPseudonyms(db, campaignId)
  for (let at = 0; at < marks.length;) {
    const from = at
    while (at < marks.length && marks[at].candidateId === marks[from].candidateId) at += 1
    const own = marks.slice(from, at)
    if (firstPassOf(own) !== 'dropped') continue
    const by = own.filter(({ mark }) => mark === 'dropped')
    const names = by.map(({ personId }) => pseudonyms.get(personId) ?? 'a member')
    reasons.set(marks[from].candidateId, notSentOnReason(names.toSorted()))
  }
  return reasons
}

/** The decision on a candidate that nobody has graded and the first pass did not send on. */
export function judgeByPass({ judgement }: Judged, reason: string): Judged {
  const setAside = { ...judgement, outcome: 'set aside' as const }
  return {
    judgement: setAside,
    reason: () => reason,
    differs: (before) =>
      before.outcome !== 'set aside' || before.grades !== 0 || before.cannotJudge !== 0 || before.reason !== reason,
  }
}
