import 'server-only'
import type { Kysely } from 'kysely'
import {
  clearSheet,
  insertMarks,
  layBackOnSheet,
  listCandidatesToPass,
  listMarksByUid,
  listStandingMarks,
  setFirstPass,
  type CandidateToPass,
} from '@/db/queries/sheet'
import type { DB } from '@/db/schema'
import { isoTime } from '@/lib/platform/clock'
import { requestConsensus } from '@/lib/platform/jobs/request-consensus'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { LEASE_MS } from '@/lib/work/queue/lease-time'
import { firstPassOf, type FirstPassState } from './first-pass'
import { assertPasses } from './may-pass'
import type { MarkInput } from './mark-input'

export interface RecordedMarks {
  /** Ids of the marks that stand, those known before among them. */
  saved: string[]
  refused: { id: string; sentence: string }[]
}

/** Marks come by the page, and the consensus follows when they pause. */
const CONSENSUS_DELAY_MS = 20_000

/**
 * Records marks of the first pass. Each is told by its id, so a repeated call changes nothing; one that cannot be taken is refused by
 * itself and the rest are taken. Where a candidate stands follows from the newest mark of each person, in whatever order they come.
 * They are taken without a lease and after the sheet was turned off too, so that nothing is lost on the way.
 * @throws Problem 403 not picked for the first pass
 */
export async function recordMarks(
  db: Kysely<DB>,
  permit: CampaignPermit<'grade'>,
  marks: readonly MarkInput[],
): Promise<RecordedMarks> {
  await assertPasses(db, permit)
  const { campaign, viewer } = permit
  return db.transaction().execute(async (transaction) => {
    const known = new Map((await listMarksByUid(transaction, uidsOf(marks))).map((mark) => [mark.uid, mark]))
    const ids = [...new Set(marks.map(({ candidate }) => candidate))]
    const candidates = new Map(
      (await listCandidatesToPass(transaction, campaign.id, ids)).map((candidate) => [candidate.id, candidate]),
    )
    const answer: RecordedMarks = { saved: [], refused: [] }
    const taken: MarkInput[] = []
    for (const mark of marks) {
      const sentence = whyNot(mark, known.get(mark.id), candidates.has(mark.candidate), viewer.id)
      if (sentence) answer.refused.push({ id: mark.id, sentence })
      else answer.saved.push(mark.id)
      if (!sentence && !known.has(mark.id)) {
        taken.push(mark)
        known.set(mark.id, { uid: mark.id, candidateId: mark.candidate, personId: viewer.id, mark: mark.mark })
      }
    }
    const at = isoTime()
    await insertMarks(
      transaction,
      taken.map(({ id, candidate, mark }) => ({
        uid: id,
        campaign_id: campaign.id,
        candidate_id: candidate,
        person_id: viewer.id,
        mark,
        at,
      })),
    )
    const moved = await followMarks(
      transaction,
      taken.flatMap(({ candidate }) => candidates.get(candidate) ?? []),
    )
    const newest = new Map(taken.map(({ candidate, mark }) => [candidate, mark]))
    const backs = [...newest].filter(([, mark]) => mark === 'taken back').map(([id]) => id)
    const passed = [...newest.keys()].filter((id) => !backs.includes(id))
    await clearSheet(transaction, campaign.id, viewer.id, passed)
    if (campaign.uses_sheet === 1) {
      const passer = { campaignId: campaign.id, personId: viewer.id }
      await layBackOnSheet(transaction, passer, backs, isoTime(LEASE_MS))
    }
    if (moved && campaign.uses_sheet === 1) await requestConsensus(transaction, campaign.id, CONSENSUS_DELAY_MS)
    return answer
  })
}

const uidsOf = (marks: readonly MarkInput[]) => marks.map(({ id }) => id)

function whyNot(
  mark: MarkInput,
  known: { candidateId: number; personId: number; mark: string } | undefined,
  isHere: boolean,
  personId: number,
): string | null {
  if (!isHere) return 'There is no such candidate with pictures in this campaign.'
  if (!known) return null
  if (known.personId === personId && known.candidateId === mark.candidate && known.mark === mark.mark) return null
  return 'This id belongs to another mark. Make a new id for each.'
}

/** Brings candidates up to their marks. Calibration stamps have no place in the pass. Whether any has come to or from 'dropped'. */
async function followMarks(transaction: Kysely<DB>, marked: readonly CandidateToPass[]): Promise<boolean> {
  const candidates = new Map(marked.filter(({ calibration }) => !calibration).map((one) => [one.id, one]))
  const standing = await listStandingMarks(transaction, [...candidates.keys()])
  const moves: Record<FirstPassState, number[]> = { waiting: [], 'sent on': [], dropped: [] }
  let moved = false
  for (const { id, firstPass, graded } of candidates.values()) {
    const now = firstPassOf(
      standing.filter(({ candidateId }) => candidateId === id),
      graded === 1,
    )
    if (now === firstPass) continue
    moves[now].push(id)
    moved ||= now === 'dropped' || firstPass === 'dropped'
  }
  for (const [state, ids] of Object.entries(moves)) await setFirstPass(transaction, ids, state as FirstPassState)
  return moved
}
