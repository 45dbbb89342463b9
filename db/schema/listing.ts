import type { Generated, Selectable } from 'kysely'
import type { CandidateState, StateCause } from './intake'
import type { Flag, IsoTime } from './values'

/**
 * What tables of candidates sort and filter by: a row a candidate, kept by triggers and recomputable from the rows that they
 * watch. What is shown comes from those rows themselves.
 */
export interface ListingTable {
  campaign_id: number
  candidate_id: number
  name: string
  /** Sorts as people count: SWS9 before SWS10. */
  name_key: string
  /** Of a calibration stamp. */
  is_stamp: Flag
  /** 0 open, 1 split, 2 confirmed, 3 set aside */
  stage: 0 | 1 | 2 | 3
  first_pass: 'waiting' | 'sent on' | 'dropped'
  ra_deg: number | null
  dec_deg: number | null
  score: number | null
  lens_redshift: number | null
  source_redshift: number | null
  designation: string | null
  /** Of the verdict that stands. */
  outcome: CandidateState | null
  mean: number | null
  spread: number | null
  probability: number | null
  /** Of everybody's answers that count. Tags in alphabetical order, joined by commas. */
  grades: Generated<number>
  cannot_judge: Generated<number>
  tags: string | null
  /** What the state rests on; null while it is open. */
  decided_by: StateCause | null
  /** From here on of an entry of the catalogue, from the grades of people who are not left out; null for others. */
  entered_at: IsoTime | null
  entry_grades: number | null
  entry_cannot_judge: number | null
  entry_mean: number | null
  entry_spread: number | null
  grade_class: 'A' | 'B' | 'C' | null
  entry_tags: string | null
}

/** A grader who has judged a candidate, as `isOwnJudgement` has it; kept by triggers. */
export interface JudgedTable {
  campaign_id: number
  person_id: number
  candidate_id: number
}

/** A table as somebody has made it: columns, order, filters. */
export interface SavedViewTable {
  id: Generated<number>
  campaign_id: number
  person_id: number
  page: 'candidates' | 'catalogue'
  name: string
  /** The query of the table's address, without a question mark. */
  query: string
  /** With the members of the campaign, for as long as its owner leads it. */
  shared: Generated<Flag>
  created_at: IsoTime
  updated_at: IsoTime
}
export type SavedView = Selectable<SavedViewTable>
