import 'server-only'
import type { Kysely } from 'kysely'
import { countDue } from '@/db/queries/matching'
import {
  listDuplicatePairs,
  listMembers,
  listStandingMerges,
  type DuplicatePair,
  type StandingMerge,
} from '@/db/queries/merges'
import { countVotes } from '@/db/queries/verdicts'
import type { DB } from '@/db/schema'
import type { GradeLetter } from '@/db/schema/grading'
import type { CandidateState } from '@/db/schema/intake'
import type { IsoTime } from '@/db/schema/values'
import { separationArcsec } from '@/lib/science/sky/separation'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { picturesOf, type PictureView } from '@/lib/work/stamps/candidate-pictures'
import { groupsOfPairs } from './groups-of-pairs'
import { knownLabels, type KnownLabel } from './known-labels'

export interface DuplicateMember {
  id: number
  name: string
  state: CandidateState
  raDeg: number
  decDeg: number
  /** From the first of the group, arcsec. */
  separationArcsec: number
  votes: Record<GradeLetter, number>
  picture: PictureView | null
  known: KnownLabel[]
}

/** Candidates that may be one object: each is near enough to another of them. */
export interface DuplicateGroup {
  members: DuplicateMember[]
  /** Largest separation of any two, arcsec. */
  widestArcsec: number
  nearestArcsec: number
}

export interface DifferingPair {
  ids: [number, number]
  names: [string, string]
  separationArcsec: number
  reason: string
  at: IsoTime
}

export interface DuplicatesPage {
  radiusArcsec: number
  /** Groups that wait, of which `groups` holds the nearest. */
  total: number
  groups: DuplicateGroup[]
  /** Pairs that a lead has told to be different, and merges that hold, newest first. */
  different: DifferingPair[]
  merged: StandingMerge[]
  /** Candidates that wait to be matched. */
  due: number
}

const MOST_PAIRS = 20_000
const MOST_GROUPS = 60
const MOST_DECIDED = 100

/** What may be one object twice, for a lead to merge or to part. */
export async function duplicatesPage(db: Kysely<DB>, permit: CampaignPermit<'lead'>): Promise<DuplicatesPage> {
  const { campaign } = permit
  const radiusArcsec = campaign.match_radius_arcsec
  const pairs = await listDuplicatePairs(db, campaign.id, radiusArcsec, MOST_PAIRS)
  const merged = await listStandingMerges(db, campaign.id, MOST_PAIRS)
  const gone = new Set(merged.map(({ mergedId }) => mergedId))
  const waiting = pairs.filter(
    ({ firstId, secondId, decision }) => decision !== 'different' && !gone.has(firstId) && !gone.has(secondId),
  )
  const grouped = groupsOfPairs(waiting)
  return {
    radiusArcsec,
    total: grouped.length,
    groups: await toldGroups(db, permit, grouped.slice(0, MOST_GROUPS)),
    different: await toldDifferent(db, permit, pairs),
    merged: merged.slice(0, MOST_DECIDED),
    due: await countDue(db, campaign.id),
  }
}

async function toldGroups(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  groups: readonly { ids: number[]; nearestArcsec: number }[],
): Promise<DuplicateGroup[]> {
  const ids = groups.flatMap((group) => group.ids)
  const members = new Map((await listMembers(db, permit.campaign.id, ids)).map((member) => [member.id, member]))
  const votes = await countVotes(db, ids)
  const pictures = await picturesOf(db, permit.campaign, ids)
  const known = await knownLabels(db, permit, ids)
  return groups.map(({ ids: own, nearestArcsec }) => {
    const placed = own.flatMap((id) => members.get(id) ?? [])
    const widest = placed.flatMap((one, place) => placed.slice(0, place).map((other) => separationArcsec(one, other)))
    return {
      nearestArcsec,
      widestArcsec: Math.max(0, ...widest),
      members: placed.map(({ rulingId: _, ...member }) => ({
        ...member,
        separationArcsec: separationArcsec(placed[0], member),
        votes: votes.get(member.id) ?? { A: 0, B: 0, C: 0, N: 0, U: 0 },
        picture: pictures.get(member.id)?.views.find((view) => view.url !== null) ?? null,
        known: known.get(member.id) ?? [],
      })),
    }
  })
}

async function toldDifferent(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  pairs: readonly DuplicatePair[],
): Promise<DifferingPair[]> {
  const decided = pairs
    .filter(({ decision }) => decision === 'different')
    .toSorted((a, b) => (b.at ?? '').localeCompare(a.at ?? ''))
    .slice(0, MOST_DECIDED)
  const ids = decided.flatMap(({ firstId, secondId }) => [firstId, secondId])
  const names = new Map((await listMembers(db, permit.campaign.id, ids)).map(({ id, name }) => [id, name]))
  return decided.map(({ firstId, secondId, separationArcsec, reason, at }) => ({
    ids: [firstId, secondId],
    names: [names.get(firstId) ?? '', names.get(secondId) ?? ''],
    separationArcsec,
    reason: reason ?? '',
    at: at ?? '',
  }))
}
