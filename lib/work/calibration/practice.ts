import 'server-only'
import type { Kysely } from 'kysely'
import { z } from 'zod'
import {
  countPracticeAnswers,
  findPracticeAnswer,
  findStampTruth,
  hasGraded,
  insertPracticeAnswer,
  isPracticeUid,
  listPracticeStamps,
  setPractises,
  type StampTruth,
} from '@/db/queries/practice'
import type { QueuedCandidate } from '@/db/queries/queue'
import type { DB } from '@/db/schema'
import type { GradeLetter } from '@/db/schema/grading'
import { fromJson } from '@/db/schema/values'
import { isoTime } from '@/lib/platform/clock'
import { conflict } from '@/lib/platform/problems/problem'
import type { PaintingTruth } from '@/lib/science/lensing/painting/paint-lens'
import { withCalled } from '@/lib/work/campaigns/called'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { picturesOf, type CandidatePictures } from '@/lib/work/stamps/candidate-pictures'
import { confusionOf, type Confusion } from './confusion'
import { practiceHalf } from './practice-half'

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
  /** Of the stamp; before the answer a grader is told its number. */
  name: string
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

/** What there is for this person to practise on, and how much of it the campaign asks for. */
async function practiceOf(db: Kysely<DB>, who: { campaignId: number; personId: number }) {
  const half = await practiceHalf(db, who)
  const stamps = await listPracticeStamps(db, who)
  const own = stamps.filter(({ id, answered }) => answered === 1 || half.has(id))
  const next = own
    .filter(({ unmet }) => unmet === 1)
    .sort((a, b) => (half.placeOf(a.id) < half.placeOf(b.id) ? -1 : 1))[0]
  return {
    stamps: stamps.length,
    answered: own.filter(({ answered }) => answered === 1).length,
    /** Those that are there for it; stamps on the bench, or graded there, are not. */
    within: own.filter(({ answered, unmet }) => answered + unmet > 0).length,
    next: next ? { id: next.id, name: next.name, raDeg: next.raDeg, decDeg: next.decDeg } : null,
  }
}

const whoOf = ({ campaign, viewer }: CampaignPermit<'read'>) => ({ campaignId: campaign.id, personId: viewer.id })

/** From the first stamp that is shown on, the bench leaves this person's practice half alone. */
export async function practiceState(db: Kysely<DB>, permit: CampaignPermit<'grade'>): Promise<PracticeState> {
  const { campaign, viewer } = permit
  const { stamps, answered, within, next } = await practiceOf(db, whoOf(permit))
  if (next) await setPractises(db, whoOf(permit))
  const pictures = next ? (await picturesOf(db, campaign, [next.id])).get(next.id) : undefined
  return {
    answered,
    wanted: Math.min(campaign.practice_wanted, within),
    stamps,
    next: next && pictures ? { ...(await withCalled(db, permit, [next]))[0], ...pictures } : null,
    own: confusionOf(await countPracticeAnswers(db, campaign.id, viewer.id)),
  }
}

/**
 * Takes an answer in practice and tells the truth. It counts nowhere: in no consensus, no reliability, no report to others.
 * @throws Problem 409 `not-in-practice` for anything but the stamp that practice shows this person now, `grade-id-taken`.
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
    const { next } = await practiceOf(transaction, whoOf(permit))
    if (!truth || next?.id !== candidateId) {
      throw conflict(
        'not-in-practice',
        'This stamp is not the one that practice shows you now, so nothing was told. Load the page again to go on.',
      )
    }
    if (await isPracticeUid(transaction, input.id)) {
      throw conflict('grade-id-taken', 'This id belongs to another answer. Make a new id for each.')
    }
    await setPractises(transaction, whoOf(permit))
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

function tell({ name, truth, explanation, painting }: StampTruth, grade: GradeLetter): PracticeTruth {
  const painted = painting === null ? null : (fromJson(painting) as { painted?: PaintingTruth | null }).painted
  const marks = painted
    ? { arcs: painted.arcs, middle: painted.middle, einsteinRadiusArcsec: painted.einsteinRadiusArcsec }
    : null
  const known = truth === 'lens' ? 'A lens, known from elsewhere.' : 'Not a lens, known from elsewhere.'
  return { name, truth, grade, explanation: explanation ?? known, marks }
}

/** Practice that a newcomer is sent to before the bench; null where they may sit down. Leads and whoever has graded may. */
export async function practiceFirst(
  db: Kysely<DB>,
  permit: CampaignPermit<'grade'>,
): Promise<{ wanted: number; answered: number } | null> {
  const { campaign, viewer, role } = permit
  if (role !== 'grader' || campaign.practice_wanted === 0) return null
  const { answered, within, next } = await practiceOf(db, whoOf(permit))
  const wanted = Math.min(campaign.practice_wanted, within)
  if (answered >= wanted || (await hasGraded(db, campaign.id, viewer.id))) return null
  // Stamps that lie on the bench, or were graded, cannot be practised on: nobody is kept out for want of them.
  return next ? { wanted, answered } : null
}

/** Whether practice is worth a place in the navigation: it has something to show. Viewers do not grade. */
export async function practiceUseful(db: Kysely<DB>, permit: CampaignPermit<'read'>): Promise<boolean> {
  if (permit.role === 'viewer') return false
  return (await practiceOf(db, whoOf(permit))).next !== null
}
