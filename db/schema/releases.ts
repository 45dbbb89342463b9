import type { Generated, GeneratedAlways, Selectable } from 'kysely'
import type { CandidateState, StateCause } from './intake'
import type { IsoTime, Json } from './values'

export type ReleaseKind = 'release' | 'erratum' | 'retraction'
export type ReleaseAccess = 'private' | 'link' | 'public'

export interface ReleaseCosmology {
  model: 'flat LCDM' | 'Planck 2018'
  /** km/s/Mpc */
  hubbleConstant: number
  omegaMatter: number
}

export interface ReleasedLabel {
  list: string
  name: string
  separationArcsec: number
  /** Whether the list kept what it knows out of new lists when the release was frozen. */
  keptOutOfNew: boolean
}

export interface ReleaseTable {
  id: Generated<number>
  campaign_id: number
  /** 1, 2, 3 … within the campaign, whatever the kind. */
  number: number
  kind: ReleaseKind
  /** Of an erratum or a retraction: the release that it corrects or withdraws. */
  corrects_id: number | null
  /** What was wrong with that one. */
  statement: string | null
  title: string
  description: string
  /** A person or group a line. */
  authors: string
  /** An SPDX id, or words. */
  licence: string
  publisher: string
  year: number
  how_to_cite: string
  software: string
  campaign_name: string
  survey: string
  acronym: string
  /** The rule of the run, as `RuleInForce` of lib/work/campaigns/rule-in-force.ts. */
  rule: Json<unknown>
  cosmology: Json<ReleaseCosmology>
  recipe_hash: string | null
  /** The run whose verdicts these are, and the newest rows of what was frozen. */
  run_id: number
  newest_grade_id: number
  newest_candidate_id: number
  newest_left_out_id: number
  newest_sheet_mark_id: number
  newest_ruling_id: number
  newest_merge_id: number
  newest_measurement_id: number
  candidates: number
  entries: number
  created_by: number
  created_at: IsoTime
}
export type Release = Selectable<ReleaseTable>

/** A judged candidate as it stood when the release was frozen. */
export interface ReleaseCandidateTable {
  release_id: number
  candidate_id: number
  name: string
  ra_deg: number | null
  dec_deg: number | null
  lens_redshift: number | null
  source_redshift: number | null
  state: CandidateState
  first_pass: 'waiting' | 'sent on' | 'dropped'
  verdict_id: number | null
  ruling_id: number | null
  /** Of the confirmed ones. */
  designation: string | null
  known_as: Json<ReleasedLabel[]> | null
}
export type ReleaseCandidate = Selectable<ReleaseCandidateTable>

export interface ReleaseEntryTable {
  id: Generated<number>
  release_id: number
  row_number: number
  candidate_id: number
  /** The last part of the entry's permanent address; unique in the release and the same in every release. */
  entry_key: string
  designation: string
  name: string
  /** ICRS degrees */
  ra_deg: number
  dec_deg: number
  /** Tenths of a degree from the south pole. */
  zone: GeneratedAlways<number>
  class: 'A' | 'B' | 'C' | null
  mean: number | null
  spread: number | null
  /** Of a lens; null by the mean method. */
  probability: number | null
  votes_a: number
  votes_b: number
  votes_c: number
  votes_n: number
  cannot_judge: number
  decided_by: StateCause
  reason: string
  /** `pseudonym: remark`, a line each. */
  remarks: string | null
  /** `tag (count); tag (count)` */
  tags: string | null
  /** What reference lists know it as. */
  known_as: Json<ReleasedLabel[]>
  einstein_radius_arcsec: number | null
  einstein_radius_error_arcsec: number | null
  n_measured: number
  /** What else was measured, as lib/work/measuring told it then. */
  measurement: Json<unknown> | null
  lens_redshift: number | null
  source_redshift: number | null
  entered_at: IsoTime | null
  /** SHA-256 of a PNG. */
  thumbnail: string | null
  /** SHA-256 of a PNG by view key, such as `colour`. */
  stamps: Json<Record<string, string>>
}
export type ReleaseEntry = Selectable<ReleaseEntryTable>

export interface ReleaseFileTable {
  release_id: number
  name: string
  media_type: string
  bytes: number
  sha256: string
}
export type ReleaseFile = Selectable<ReleaseFileTable>

/** The newest row of a release holds; without one it is private. */
export interface ReleaseAccessTable {
  id: Generated<number>
  release_id: number
  access: ReleaseAccess
  token_hash: string | null
  changed_by: number
  changed_at: IsoTime
}

/** A release whose files could not be made, and that was left behind. */
export interface ReleaseGivenUpTable {
  release_id: number
  reason: string
  given_up_by: number
  given_up_at: IsoTime
}
