import type { Generated, Selectable } from 'kysely'
import type { IsoTime, Json } from './values'

/** How the values of a coordinate are written; text is sexagesimal, or degrees where it is one number. */
export type ListAngleUnit = 'deg' | 'hour' | 'rad' | 'text'
export type ListFrame = 'ICRS' | 'FK5' | 'GALACTIC'

/** Which columns of a list's file hold what. */
export interface ListMapping {
  ra: string
  dec: string
  raUnit: ListAngleUnit
  decUnit: ListAngleUnit
  frame: ListFrame
  name: string | null
  redshift: string | null
  /** Further columns whose values are kept. */
  more: string[]
  /** A lead has read what is wrong with the file and takes it in all the same. */
  allTheSame: boolean
}

export type ListState = 'draft' | 'reading' | 'ready' | 'refused' | 'retired'

export interface ReferenceListTable {
  id: Generated<number>
  campaign_id: number
  name: string
  source: string
  list_date: string
  file_name: string
  format: 'csv' | 'votable'
  sha256: string
  bytes: number
  mapping: Json<ListMapping> | null
  rows: Generated<number>
  positions: Generated<number>
  radius_arcsec: number
  keeps_out_of_new: Generated<0 | 1>
  state: ListState
  reason: string | null
  uploaded_by: number
  uploaded_at: IsoTime
  state_since: IsoTime
}
export type ReferenceList = Selectable<ReferenceListTable>

export interface ReferenceObjectTable {
  list_id: number
  row_number: number
  name: string
  ra_deg: number | null
  dec_deg: number | null
  redshift: number | null
  more: Json<Record<string, string>> | null
}

export interface ObjectMatchTable {
  candidate_id: number
  list_id: number
  row_number: number
  separation_arcsec: number
}

export interface CandidateMatchTable {
  first_id: number
  second_id: number
  first_campaign_id: number
  second_campaign_id: number
  separation_arcsec: number
}

export interface MatchDueTable {
  campaign_id: number
  candidate_id: number
}

export type Decision = 'same' | 'different' | 'undecided'

export interface MatchDecisionTable {
  id: Generated<number>
  campaign_id: number
  candidate_id: number
  other_id: number | null
  list_id: number | null
  row_number: number | null
  decision: Decision
  reason: string
  person_id: number
  created_at: IsoTime
}
export type MatchDecision = Selectable<MatchDecisionTable>

export interface MergeTable {
  id: Generated<number>
  campaign_id: number
  kept_id: number
  merged_id: number
  event: 'merged' | 'parted'
  reason: string
  person_id: number
  ruling_id: number
  ruling_before_id: number | null
  created_at: IsoTime
}
export type Merge = Selectable<MergeTable>
