import type { Generated, Selectable } from 'kysely'
import type { CandidateState, StateCause } from './intake'
import type { IsoTime, Json } from './values'

/** Calibration candidates are in none of these numbers. States are those of the verdicts, before any ruling. */
export interface RunSummary {
  candidates: number
  /** Answers that are grades; 'cannot judge' is not one. */
  grades: number
  cannotJudge: number
  graders: number
  open: number
  split: number
  confirmed: number
  setAside: number
  /** Verdicts that differ from the candidate's verdict before. */
  changed: number
  alphaOrdinal: number | null
  alphaNote: string | null
  fleissKappa: number | null
  kappaNote: string | null
}

/** The reliability model of a run: everything that its verdicts, the live estimates and the explanations need. */
export interface RunModel {
  /** share of lenses among the candidates */
  lensShare: number
  iterations: number
  converged: boolean
  logLikelihood: number
  /** In order of person. Rates are those of the grades A, B, C, N, and sum to 1. */
  graders: { personId: number; grades: number; calibrationGrades: number; lens: number[]; notLens: number[] }[]
  /** Rates of somebody of whom nothing is known yet. */
  newcomer: { lens: number[]; notLens: number[] }
  leftOut: number[]
}

export interface RunTable {
  id: Generated<number>
  campaign_id: number
  rule_id: number
  /** SHA-256 over the rule and every standing grade, in a fixed order. */
  input_digest: string
  /** What the run read: grades and candidates up to these rows. With the rule they are its whole input. */
  newest_grade_id: number
  newest_candidate_id: number
  /** The newest decision on leaving graders out that it read; 0 for none. */
  newest_left_out_id: Generated<number>
  /** The newest mark of the first pass that it read; 0 where the campaign used no sheet. */
  newest_sheet_mark_id: Generated<number>
  summary: Json<RunSummary>
  /** Of the reliability method: what was fitted. */
  model: Json<RunModel> | null
  /** null when it started by itself. */
  started_by: number | null
  created_at: IsoTime
}
export type Run = Selectable<RunTable>

export interface VerdictTable {
  id: Generated<number>
  run_id: number
  candidate_id: number
  outcome: CandidateState
  grades: number
  cannot_judge: number
  mean: number | null
  spread: number | null
  probability: number | null
  reason: string
}
export type Verdict = Selectable<VerdictTable>

/** A row a candidate under the reliability method; not history, made again by each run and kept with each grade. */
export interface EstimateTable {
  candidate_id: number
  run_id: number
  newest_grade_id: number
  grades: number
  cannot_judge: number
  /** sum of the grades' weights, natural log of the odds */
  evidence: number
  probability: number
  outcome: CandidateState
}
export type Estimate = Selectable<EstimateTable>

/** Whether a person's grades count from then on; the newest row of a person holds, without one they count. */
export interface LeftOutTable {
  id: Generated<number>
  campaign_id: number
  person_id: number
  left_out: 0 | 1
  reason: string
  decided_by: number
  created_at: IsoTime
}
export type LeftOut = Selectable<LeftOutTable>

export type RulingOutcome = 'confirmed' | 'set aside' | 'open' | 'by verdict'

export interface RulingTable {
  id: Generated<number>
  candidate_id: number
  person_id: number
  outcome: RulingOutcome
  grade: 'A' | 'B' | 'C' | null
  reason: string
  created_at: IsoTime
}
export type Ruling = Selectable<RulingTable>

export interface StateChangeTable {
  id: Generated<number>
  candidate_id: number
  from_state: CandidateState
  to_state: CandidateState
  cause: StateCause
  cause_id: number
  at: IsoTime
}
export type StateChange = Selectable<StateChangeTable>
