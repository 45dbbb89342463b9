import 'server-only'
import type { Kysely } from 'kysely'
import { listObjectMatches, type ObjectMatchRow } from '@/db/queries/matching'
import {
  listDuplicatesOf,
  listMergeEvents,
  listOtherCampaignMatches,
  type DuplicateOf,
  type MergeEvent,
  type OtherCampaignMatch,
} from '@/db/queries/merges'
import type { DB } from '@/db/schema'
import type { IsoTime } from '@/db/schema/values'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { candidateEvidence, type Judgement } from '@/lib/work/rulings/candidate-evidence'
import { toldOf } from './known-labels'

export interface ToldMerge {
  id: number
  event: 'merged' | 'parted'
  /** This candidate was the one that was kept. */
  isKept: boolean
  other: { id: number; name: string }
  reason: string
  by: string
  at: IsoTime
  /** It is the newest event of the two: they are merged now. */
  holds: boolean
}

/** What was made of the other candidate of a merge that holds: its grades never cross over. */
export interface OtherHistory {
  id: number
  name: string
  isKept: boolean
  judgement: Judgement
}

/** What lies at the place of a candidate. */
export interface CandidateMatches {
  /** Nearest first. Only leads are told those that a lead has found to differ. */
  objects: ObjectMatchRow[]
  /** In other campaigns that the person is a member of; as a grader there, those judged by them and decided. */
  elsewhere: OtherCampaignMatch[]
  /** In the same campaign, without what it is merged with now; not told to graders. */
  near: DuplicateOf[]
  merges: ToldMerge[]
  /** Of those that are merged with it now. */
  histories: OtherHistory[]
}

/**
 * Matches and merges of one candidate, for its page. A grader is told of a candidate that they have judged and that is decided, and of
 * a merge only where that holds for both.
 * @returns null where the person may learn nothing of it.
 */
export async function candidateMatches(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  candidateId: number,
): Promise<CandidateMatches | null> {
  if (!(await toldOf(db, permit, [candidateId])).includes(candidateId)) return null
  const { campaign, viewer, role } = permit
  const objects = await listObjectMatches(db, [candidateId])
  const events = await listMergeEvents(db, candidateId)
  const told = new Set(await toldOf(db, permit, [...new Set(events.map((event) => otherOf(event, candidateId).id))]))
  const merges = events
    .map((event) => toldMerge(event, candidateId, events, role === 'lead'))
    .filter(({ other }) => told.has(other.id))
  const histories: OtherHistory[] = []
  for (const { other, isKept } of merges.filter(({ holds }) => holds)) {
    const { judgement } = await candidateEvidence(db, permit, other.id)
    // The page shows whether the other was the kept one.
    if (judgement) histories.push({ ...other, isKept: !isKept, judgement })
  }
  return {
    objects: objects.filter(({ decision }) => role === 'lead' || decision !== 'different'),
    elsewhere: await listOtherCampaignMatches(db, viewer.id, [candidateId]),
    near:
      role === 'grader'
        ? []
        : (await listDuplicatesOf(db, campaign.id, candidateId, campaign.match_radius_arcsec)).filter(
            ({ id }) => !merges.some(({ holds, other }) => holds && other.id === id),
          ),
    merges,
    histories,
  }
}

const otherOf = (event: MergeEvent, candidateId: number) =>
  event.keptId === candidateId
    ? { id: event.mergedId, name: event.mergedName }
    : { id: event.keptId, name: event.keptName }

function toldMerge(event: MergeEvent, candidateId: number, events: readonly MergeEvent[], isNamed: boolean): ToldMerge {
  const newest = events.filter(({ mergedId }) => mergedId === event.mergedId).at(-1)
  return {
    id: event.id,
    event: event.event,
    isKept: event.keptId === candidateId,
    other: otherOf(event, candidateId),
    reason: event.reason,
    by: isNamed ? event.by : (event.pseudonym ?? 'a member'),
    at: event.at,
    holds: event.event === 'merged' && newest?.id === event.id,
  }
}
