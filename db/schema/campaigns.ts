import type { Generated, Selectable } from 'kysely'
import type { Role } from './people'
import type { IsoTime, Json } from './values'

export interface CampaignTable {
  id: Generated<number>
  slug: string
  name: string
  survey: string
  acronym: string
  /** In order of wavelength, shortest first. */
  bands: Json<string[]>
  /** How a file name tells candidate and band, such as `{candidate}_{band}.fits`; null takes that default. */
  name_pattern: string | null
  /** Of 'flat LCDM' the next two hold; Planck 2018 has its own. */
  cosmology: Generated<'flat LCDM' | 'Planck 2018'>
  /** km/s/Mpc */
  hubble_constant: Generated<number>
  omega_matter: Generated<number>
  /** What the mean method's queue goes by. */
  queue_order: Generated<'most needed' | 'score' | 'shuffled'>
  /** Shares of a person's looks that are calibration stamps, and own candidates that come back turned. */
  calibration_share: Generated<number>
  repeat_share: Generated<number>
  /** Practice stamps asked of a grader before the first candidate. */
  practice_wanted: Generated<number>
  uses_sheet: Generated<0 | 1>
  /** How near two candidates must be to be proposed as one object. */
  match_radius_arcsec: Generated<number>
  created_by: number
  created_at: IsoTime
}
export type Campaign = Selectable<CampaignTable>

export interface MembershipTable {
  id: Generated<number>
  campaign_id: number
  person_id: number
  role: Role
  /** Stands for the person in releases; never changes. */
  pseudonym: string
  /** Whether a lead has asked this person to make the first pass over the sheet. */
  passes: Generated<0 | 1>
  /** Whether this person has been shown a stamp to practise on: from then on half of them never come at their bench. */
  practises: Generated<0 | 1>
  created_at: IsoTime
  ended_at: IsoTime | null
}
export type Membership = Selectable<MembershipTable>

export interface MeanParameters {
  confirmMean: number
  setAsideMean: number
  splitSpread: number
}

/** Error rates of the sequential test; see lib/science/agreement/sequential-test.ts. */
export interface ReliabilityParameters {
  falseConfirmed: number
  missedLens: number
}

export interface RuleTable {
  id: Generated<number>
  campaign_id: number
  version: number
  method: 'mean' | 'reliability'
  /** Of the reliability method: the most looks. */
  grades_wanted: number
  least_grades: number
  parameters: Json<MeanParameters | ReliabilityParameters>
  created_by: number
  created_at: IsoTime
}
export type Rule = Selectable<RuleTable>

export interface RecipeTable {
  id: Generated<number>
  campaign_id: number
  version: number
  /** The imaging recipe of lib/science/imaging/recipe.ts as canonical JSON. */
  parameters: string
  /** SHA-256 of `parameters`. */
  hash: string
  created_by: number
  created_at: IsoTime
}
export type RecipeRow = Selectable<RecipeTable>
