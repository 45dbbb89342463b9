import 'server-only'
import type { Kysely, Transaction } from 'kysely'
import { countLiveLeases } from '@/db/queries/grading'
import { findPracticeAnswer } from '@/db/queries/practice'
import type { DB } from '@/db/schema'
import { isoTime } from '@/lib/platform/clock'
import { conflict } from '@/lib/platform/problems/problem'
import { practiceFirst } from '@/lib/work/calibration/practice'
import type { CampaignPermit } from '@/lib/work/people/permission'

/**
 * Whether a person may give a candidate its first grade of theirs at all. A grade of a calibration stamp measures who gives it, so it
 * is taken of nobody who has been told what the stamp is: by practice, or as a lead by its page. A newcomer of whom the campaign asks
 * practice first grades what has been lent to them and nothing else.
 * @throws Problem 409 `judgement-seen`, `practice-first`
 */
export async function assertMayBegin(
  transaction: Transaction<DB>,
  permit: CampaignPermit<'grade'>,
  candidate: { id: number; is_calibration: number | boolean },
): Promise<void> {
  const { viewer, role, campaign } = permit
  if (candidate.is_calibration) {
    const told =
      role === 'lead'
        ? 'Leads are shown which candidates are calibration stamps, and what they are'
        : (await findPracticeAnswer(transaction, candidate.id, viewer.id))
          ? 'Practice has told you what this stamp is'
          : null
    if (told) {
      throw conflict(
        'judgement-seen',
        `${told}, so a grade of it measures nothing and was not taken. Go on with the next.`,
      )
    }
  }
  if (role !== 'grader' || campaign.practice_wanted === 0) return
  const { own } = await countLiveLeases(transaction, candidate.id, viewer.id, isoTime())
  if (own === 0) await assertPractised(transaction, permit)
}

/** @throws Problem 409 `practice-first` for a newcomer of whom the campaign asks practice. */
export async function assertPractised(db: Kysely<DB>, permit: CampaignPermit<'grade'>): Promise<void> {
  const practice = await practiceFirst(db, permit)
  if (!practice) return
  const left = practice.wanted - practice.answered
  throw conflict(
    'practice-first',
    `This campaign asks newcomers to practise first: ${left === 1 ? 'one stamp' : `${left} stamps`} more, then the bench is open.`,
  )
}
