import 'server-only'
import type { Kysely } from 'kysely'
import {
  countByDay,
  countByLetter,
  listCalibrationAnswers,
  listGraders,
  listSeconds,
  type GraderRow,
} from '@/db/queries/grader-record'
import { countLateLooks } from '@/db/queries/late-grades'
import { countPracticeAnswers } from '@/db/queries/practice'
import { listRepeatPairs } from '@/db/queries/repeats'
import type { DB } from '@/db/schema'
import type { GradeLetter } from '@/db/schema/grading'
import { notFound } from '@/lib/platform/problems/problem'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { confusionOf, LETTERS, type Confusion } from './confusion'
import { selfConsistency, type SelfConsistency } from './self-consistency'

export interface GraderRecord {
  person: { id: number; name: string }
  /** First grades that stand, in the order A, B, C, N, U. */
  grades: { letter: GradeLetter; n: number }[]
  looks: number
  /** Looks that came when their candidate had all it wants: kept, and counted nowhere. */
  late: number
  /** UTC days with looks, the newest first. */
  days: { day: string; n: number }[]
  /** Median over the newest looks; null without any. */
  medianSeconds: number | null
  consistency: SelfConsistency
  /** At the bench. To the person themselves in whole steps, so that no single stamp can be told by it. */
  calibration: Confusion
  /** How many more calibration answers there are than `calibration` counts. */
  notYet: boolean
  /** In practice: the person's own, told to nobody else. */
  practice: Confusion | null
}

const DAYS = 30
const NEWEST = 500
/** A grader's own calibration results come so many at a time. */
const STEP = 5

/** The record of whoever asks. */
export const ownRecord = (db: Kysely<DB>, { campaign, viewer }: CampaignPermit<'grade'>): Promise<GraderRecord> =>
  recordOf(db, campaign.id, viewer, true)

/** @throws Problem 404 for somebody who does not grade in this campaign. */
export async function recordOfGrader(
  db: Kysely<DB>,
  { campaign }: CampaignPermit<'lead'>,
  personId: number,
): Promise<GraderRecord> {
  const person = (await listGraders(db, campaign.id)).find(({ id }) => id === personId)
  if (!person) throw notFound('grader')
  return recordOf(db, campaign.id, person, false)
}

export const gradersOf = (db: Kysely<DB>, { campaign }: CampaignPermit<'lead'>): Promise<GraderRow[]> =>
  listGraders(db, campaign.id)

async function recordOf(
  db: Kysely<DB>,
  campaignId: number,
  { id, name }: { id: number; name: string },
  own: boolean,
): Promise<GraderRecord> {
  const who = { campaignId, personId: id }
  const letters = await countByLetter(db, who)
  const answers = await listCalibrationAnswers(db, who)
  const told = own ? answers.slice(0, Math.floor(answers.length / STEP) * STEP) : answers
  return {
    person: { id, name },
    grades: LETTERS.map((letter) => ({ letter, n: letters.find(({ grade }) => grade === letter)?.n ?? 0 })),
    looks: letters.reduce((sum, { n }) => sum + n, 0),
    late: await countLateLooks(db, campaignId, id),
    days: await countByDay(db, who, DAYS),
    medianSeconds: medianOf(await listSeconds(db, who, NEWEST)),
    consistency: selfConsistency(await listRepeatPairs(db, who)),
    calibration: confusionOf(told.map((answer) => ({ ...answer, n: 1 }))),
    notYet: told.length < answers.length,
    practice: own ? confusionOf(await countPracticeAnswers(db, campaignId, id)) : null,
  }
}

function medianOf(values: readonly number[]): number | null {
  if (values.length === 0) return null
  const sorted = values.toSorted((a, b) => a - b)
  const middle = Math.floor(sorted.length / 2)
  return sorted.length % 2 === 1 ? sorted[middle] : (sorted[middle - 1] + sorted[middle]) / 2
}
