import 'server-only'
import { createHash } from 'node:crypto'
import type { Kysely } from 'kysely'
import { z } from 'zod'
import { listUnseenStamps } from '@/db/queries/mixing'
import {
  countPracticeAnswers,
  findPracticeAnswer,
  findPracticeCounts,
  findStampTruth,
  hasGraded,
  insertPracticeAnswer,
  type PracticeCounts,
  type StampTruth,
} from '@/db/queries/practice'
import type { QueuedCandidate } from '@/db/queries/queue'
import type { DB } from '@/db/schema'
import type { GradeLetter } from '@/db/schema/grading'
import { fromJson } from '@/db/schema/values'
import { isoTime } from '@/lib/platform/clock'
import { conflict } from '@/lib/platform/problems/problem'
import type { PaintingTruth } from '@/lib/science/lensing/painting/paint-lens'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { picturesOf, type CandidatePictures } from '@/lib/work/stamps/candidate-pictures'
import { confusionOf, type Confusion } from './confusion'

export interface PracticeStamp extends QueuedCandidate, CandidatePictures {}

export interface PracticeState {
  answered: number
  /** How many the campaign asks of its graders, and has. */
  wanted: number
  /** Whether the campaign has any stamps to practise on. */
  stamps: number
  next: PracticeStamp | null
  /** The person's own answers so far, shown to them alone. */
  own: Confusion
}

export interface PracticeTruth {
  truth: 'lens' | 'not a lens'
  grade: GradeLetter
  explanation: string
  /** Where painted light lies; null where nothing was painted. */
  marks: Pick<PaintingTruth, 'arcs' | 'middle' | 'einsteinRadiusArcsec'> | null
}

export const PracticeInput = z.strictObject({
  grade: z.enum(['A', 'B', 'C', 'N', 'U'], 'A grade is A, B, C or N, or U for cannot judge.'),
  /** Made by the client; a repeated delivery is recognised by the stamp. */
  id: z.string().regex(/^[A-Za-z0-9_-]{8,64}$/, 'The id has 8 to 64 letters, digits, - or _, such as a UUID.'),
  seconds: z
    .number('The time taken is a number of seconds.')
    .min(0, 'The time taken is not negative.')
    .max(86_400)
    .nullish()
    .transform((seconds) => seconds ?? null),
})
export type PracticeInput = z.output<typeof PracticeInput>

/** Of the stamps of a campaign at least half stay for measuring: whoever has practised on a stamp is never measured by it. */
const mostPractice = ({ wanted, stamps }: PracticeCounts): number =>
  Math.min(stamps, Math.max(wanted, Math.ceil(stamps / 2)))

export async function practiceState(db: Kysely<DB>, permit: CampaignPermit<'grade'>): Promise<PracticeState> {
  const { campaign, viewer } = permit
  const counts = await findPracticeCounts(db, campaign.id, viewer.id)
  const next = await nextStamp(db, permit, counts)
  const pictures = next ? (await picturesOf(db, campaign, [next.id])).get(next.id) : undefined
  return {
    answered: counts.answered,
    wanted: Math.min(counts.wanted, counts.stamps),
    stamps: counts.stamps,
    next: next && pictures ? { ...next, ...pictures } : null,
    own: confusionOf(await countPracticeAnswers(db, campaign.id, viewer.id)),
  }
}

/**
 * Stamps come in an order of each person's own that does not change, so that an answer is taken for the one that is shown and no
 * other: otherwise practice would tell the truth of whatever lies on the bench.
 */
async function nextStamp(
  db: Kysely<DB>,
  { campaign, viewer }: CampaignPermit<'grade'>,
  counts: PracticeCounts,
): Promise<QueuedCandidate | null> {
  if (counts.answered >= mostPractice(counts)) return null
  const place = (id: number) => createHash('sha256').update(`${viewer.id} ${id}`).digest('hex')
  const unseen = await listUnseenStamps(db, { campaignId: campaign.id, personId: viewer.id })
  return (
    unseen.map((stamp) => ({ stamp, at: place(stamp.id) })).sort((a, b) => (a.at < b.at ? -1 : 1))[0]?.stamp ?? null
  )
}

/**
 * Takes an answer in practice and tells the truth. It counts nowhere: in no consensus, no reliability, no report to others.
 * @throws Problem 409 `not-in-practice` for anything but the stamp that practice shows this person now.
 */
export async function answerPractice(
  db: Kysely<DB>,
  permit: CampaignPermit<'grade'>,
  candidateId: number,
  input: PracticeInput,
): Promise<PracticeTruth> {
  const { campaign, viewer } = permit
  return db.transaction().execute(async (transaction) => {
    const given = await findPracticeAnswer(transaction, candidateId, viewer.id)
    const truth = await findStampTruth(transaction, campaign.id, candidateId)
    if (given && truth) return tell(truth, given.grade)
    const next = await nextStamp(transaction, permit, await findPracticeCounts(transaction, campaign.id, viewer.id))
    if (!truth || next?.id !== candidateId) {
      throw conflict(
        'not-in-practice',
        'This stamp is not the one that practice shows you now, so nothing was told. Load the page again to go on.',
      )
    }
    await insertPracticeAnswer(transaction, {
      uid: input.id,
      campaignId: campaign.id,
      candidateId,
      personId: viewer.id,
      grade: input.grade,
      seconds: input.seconds,
      now: isoTime(),
    })
    return tell(truth, input.grade)
  })
}

function tell({ truth, explanation, painting }: StampTruth, grade: GradeLetter): PracticeTruth {
  const painted = painting === null ? null : (fromJson(painting) as { painted?: PaintingTruth | null }).painted
  const marks = painted
    ? { arcs: painted.arcs, middle: painted.middle, einsteinRadiusArcsec: painted.einsteinRadiusArcsec }
    : null
  const known = truth === 'lens' ? 'A lens, known from elsewhere.' : 'Not a lens, known from elsewhere.'
  return { truth, grade, explanation: explanation ?? known, marks }
}

/** Practice that a newcomer is sent to before the bench; null where they may sit down. Leads and whoever has graded may. */
export async function practiceFirst(
  db: Kysely<DB>,
  permit: CampaignPermit<'grade'>,
): Promise<{ wanted: number; answered: number } | null> {
  const { campaign, viewer, role } = permit
  if (role !== 'grader') return null
  const counts = await findPracticeCounts(db, campaign.id, viewer.id)
  const wanted = Math.min(counts.wanted, counts.stamps)
  if (counts.answered >= wanted || (await hasGraded(db, campaign.id, viewer.id))) return null
  // Stamps that lie on the bench, or were graded, cannot be practised on: nobody is kept out for want of them.
  return (await nextStamp(db, permit, counts)) ? { wanted, answered: counts.answered } : null
}

/** Whether practice is worth a place in the navigation: it has something to show, or has been done. Viewers do not grade. */
export async function practiceUseful(
  db: Kysely<DB>,
  { campaign, viewer, role }: CampaignPermit<'read'>,
): Promise<boolean> {
  if (role === 'viewer') return false
  const counts = await findPracticeCounts(db, campaign.id, viewer.id)
  return counts.stamps > 0 && counts.answered < mostPractice(counts)
}
