import type { Generated, Selectable } from 'kysely'
import type { IsoTime, Json } from './values'

export interface BatchTable {
  id: Generated<number>
  campaign_id: number
  name: string
  created_by: number
  created_at: IsoTime
  /** Files of a paused batch are kept and not read. */
  state: Generated<'open' | 'paused'>
}
export type Batch = Selectable<BatchTable>

export type FileFate = 'stored' | 'read' | 'imaged' | 'duplicate' | 'refused'

export interface FileTable {
  id: Generated<number>
  campaign_id: number
  batch_id: number
  /** The name it was delivered under, folders included. */
  name: string
  kind: 'fits' | 'manifest' | 'archive'
  sha256: string
  bytes: number
  fate: FileFate
  /** A stable word for why it was refused, such as `truncated-data` or `no-band`. */
  fault: string | null
  /** The sentence for people. */
  reason: string | null
  duplicate_of: number | null
  replaced_by: number | null
  created_by: number
  created_at: IsoTime
  updated_at: IsoTime
  /** The archive that it came out of. */
  archive_id: number | null
  /** Of a manifest: which of its headers stand for which columns, where a lead has chosen; null leaves it to their spelling. */
  columns: Json<Record<string, string>> | null
}
export type FileRow = Selectable<FileTable>

/** What is wrong with a part of a file: a line of a manifest, a member of an archive. */
export interface FileProblemTable {
  id: Generated<number>
  file_id: number
  line: number | null
  sentence: string
}

export interface ManifestRowTable {
  id: Generated<number>
  campaign_id: number
  file_id: number
  line: number
  /** As the manifest writes it. */
  file_name: string | null
  /** Its last part without endings, by which delivered files find their row; compared without regard to case. */
  file_base: string | null
  candidate: string | null
  band: string | null
  ra_deg: number | null
  dec_deg: number | null
  pixel_scale_arcsec: number | null
  score: number | null
  lens_redshift: number | null
  source_redshift: number | null
  /** What its candidate is known to be, which makes it a calibration stamp, and what practice says of it. */
  truth: 'lens' | 'not a lens' | null
  explanation: string | null
}
export type ManifestRow = Selectable<ManifestRowTable>

export type CandidateState = 'open' | 'split' | 'confirmed' | 'set aside'
export type StateCause = 'verdict' | 'ruling'

export interface CandidateTable {
  id: Generated<number>
  campaign_id: number
  name: string
  /** ICRS degrees; null until a header or a manifest has told. */
  ra_deg: number | null
  dec_deg: number | null
  pixel_scale_arcsec: number | null
  /** What the machine search gave it. */
  score: number | null
  lens_redshift: number | null
  source_redshift: number | null
  /** Set on calibration stamps only; never leaves the server before the grade is given. */
  truth: 'lens' | 'not a lens' | null
  /** Of a painted calibration stamp: the candidate whose cutouts it was painted over, and what was painted. */
  painted_over: Generated<number | null>
  painting: Generated<Json<unknown> | null>
  /** Of a calibration stamp: what practice says of it after the answer. */
  explanation: Generated<string | null>
  /** Where it is in the first pass over the sheet; counts only in campaigns that use it. */
  first_pass: Generated<'waiting' | 'sent on' | 'dropped'>
  /** Drawn once and told to nobody: the order of the queue among equals. */
  spread: Generated<number>
  imaged_at: IsoTime | null
  /** Standing first grades, 'cannot judge' included. */
  grades_given: Generated<number>
  /** Looks that a lead has asked for by reopening it; counts where it is above what the rule wants. */
  looks_asked: Generated<number>
  /** 1 when the estimate has decided, so that no more looks are wanted. */
  settled: Generated<0 | 1>
  /** What one more look would tell, in bits; the queue of the reliability method goes by it. */
  look_value: Generated<number>
  state: Generated<CandidateState>
  state_cause: StateCause | null
  state_cause_id: number | null
  state_since: IsoTime
  /** The newest verdict and the newest ruling. */
  verdict_id: number | null
  ruling_id: number | null
  created_at: IsoTime
}
export type Candidate = Selectable<CandidateTable>

export interface PlaneTable {
  id: Generated<number>
  candidate_id: number
  band: string
  file_id: number
  hdu: number
  plane_index: number
  width: number
  height: number
  /** The Wcs object of lib/science/sky/wcs.ts. */
  wcs: Json<unknown> | null
  pixel_scale_arcsec: number | null
  background: number | null
  noise: number | null
}
export type Plane = Selectable<PlaneTable>

export interface StampTable {
  id: Generated<number>
  campaign_id: number
  candidate_id: number
  recipe_id: number
  /** A view key such as `colour`, `deep` or `band:g`. */
  view: string
  sha256: string
  bytes: number
  width: number
  height: number
  note: string | null
}
export type Stamp = Selectable<StampTable>
