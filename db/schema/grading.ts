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
  occasion: 'first' | 'repeat' | 'asked'
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
