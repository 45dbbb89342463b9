import type { Generated, Selectable } from 'kysely'
import type { IsoTime, Json } from './values'

export type GradeLetter = 'A' | 'B' | 'C' | 'N' | 'U'

export interface LeaseTable {
  id: Generated<number>
  campaign_id: number
  candidate_id: number
  person_id: number
  until: IsoTime
}

export interface GradeTable {
  id: Generated<number>
  /** Made by the client, so that a repeated delivery is recognised. */
  uid: string
  campaign_id: number
  candidate_id: number
  person_id: number
  /** 'late': it came when the candidate had all its looks, and counts nowhere. */
  occasion: 'first' | 'repeat' | 'asked' | 'late'
  /** U is 'cannot judge'. */
  grade: GradeLetter
  tags: Json<string[]>
  /** Why it cannot be judged; only with U. */
  reason: string | null
  remark: string | null
  recipe_id: number | null
  view: string | null
  seconds: number | null
  /** The grade this one corrects. A grade that no other replaces stands. */
  replaces: number | null
  given_at: IsoTime
}
export type GradeRow = Selectable<GradeTable>

/** Once for each grader and candidate, when its judgement was first shown to them. */
export interface JudgementShownTable {
  campaign_id: number
  candidate_id: number
  person_id: number
  at: IsoTime
}

/** A mark of the first pass. A person's newest holds; 'taken back' leaves them without one. */
export interface SheetMarkTable {
  id: Generated<number>
  uid: string
  campaign_id: number
  candidate_id: number
  person_id: number
  mark: 'sent on' | 'dropped' | 'taken back'
  at: IsoTime
}

/** What a person answered in practice; never counted in any consensus or reliability. */
export interface PracticeAnswerTable {
  id: Generated<number>
  uid: string
  campaign_id: number
  candidate_id: number
  person_id: number
  grade: GradeLetter
  seconds: number | null
  given_at: IsoTime
}

/** A candidate that comes back to the person who graded it; answered by a grade of the occasion 'repeat'. */
export interface RepeatLookTable {
  id: Generated<number>
  campaign_id: number
  candidate_id: number
  person_id: number
  /** Quarter turns 0 to 3, mirrored first from 4 on. */
  turned: number
  lent_at: IsoTime
  grade_id: number | null
}

/** Whose sheet a candidate of the first pass lies on: one person's, but for calibration stamps. */
export interface SheetLeaseTable {
  id: Generated<number>
  campaign_id: number
  candidate_id: number
  person_id: number
  until: IsoTime
}

/**
 * Imaged candidates that no ruling has decided, calibration stamps left out, by what decides whether they are lent: of person 0
 * all, of a person those that they have graded. Triggers keep it with every change.
 */
export interface QueueCountTable {
  campaign_id: number
  person_id: number
  grades_given: number
  settled: 0 | 1
  first_pass: 'waiting' | 'sent on' | 'dropped'
  n: number
}

/** Looks that a person has given, corrections left out. A trigger keeps it with every grade. */
export interface LookCountTable {
  campaign_id: number
  person_id: number
  occasion: GradeRow['occasion']
  n: number
}
