/** What the Agreement page shows, as plain objects. Graders are named by their place in `graders`. */
import type { Interval } from '@/lib/science/agreement/binomial-intervals'
import type { FinishEstimate } from './finish-estimate'

export interface GraderLabel {
  /** name for leads, pseudonym for viewers */
  label: string
  /** the membership has ended */
  ended: boolean
  /** for leads only */
  personId: number | null
  /** who decided and why: for leads only */
  leftOut: { since: string; by: string | null; reason: string | null } | null
}

export interface ShareEstimate {
  value: number
  interval: Interval
}

export interface Coefficient {
  key: 'alpha' | 'kappa' | 'ac1' | 'ac2'
  name: string
  value: number | null
  interval: Interval | null
  /** what it was computed over, or why there is none */
  note: string
}

export interface CampaignAgreement {
  coefficients: Coefficient[]
  percentAgreement: number | null
  candidates: number
  resamples: number
}

export interface PairAgreement {
  first: number
  second: number
  /** candidates that both graded, calibration stamps left out */
  shared: number
  quadratic: number | null
  quadraticInterval: Interval | null
  plain: number | null
  sameGrade: number | null
  /** why there is no kappa */
  reason: string | null
}

export interface DriftWindow {
  /** the person's own grades from this to that one, counted from 1 */
  from: number
  to: number
  fromAt: number
  toAt: number
  /** null where the window holds less than one lens, or less than one candidate that is none */
  lensesSeen: ShareEstimate | null
  nonLensesSeen: ShareEstimate | null
}

export interface Drift {
  size: number
  windows: DriftWindow[]
  /** first third of the grades against the last; null with too few grades */
  change: DriftChange | null
}

export interface DriftChange {
  what: 'lenses' | 'what is no lens'
  before: ShareEstimate
  after: ShareEstimate
}

export interface GraderReport {
  grades: number
  cannotJudge: number
  calibrationGrades: number
  medianSeconds: number | null
  lensesSeen: ShareEstimate
  nonLensesSeen: ShareEstimate
  /** expected number of lenses and of others among what they graded */
  lenses: number
  nonLenses: number
  bitsPerLook: number
  /** A, B, C, N: how often given, and natural log of the likelihood ratio */
  letters: { grade: 'A' | 'B' | 'C' | 'N'; given: number; weight: number }[]
  consistency: { pairs: number; same: ShareEstimate; quadratic: number | null } | null
  quickStretch: { from: number; to: number; at: number; medianSeconds: number } | null
  drift: Drift
}

export interface CalibrationReport {
  stamps: number
  lensStamps: number
  graded: number
  prior: number | null
  bins: {
    low: number
    high: number
    count: number
    lenses: number
    meanProbability: number | null
    lensShare: number | null
    interval: Interval | null
  }[]
  brierScore: number | null
  /** Brier score of always saying the share of lenses among the stamps */
  baseBrierScore: number | null
  expectedCalibrationError: number | null
}

export interface ScoreReport {
  confirmed: number
  setAside: number
  undecided: number
  withoutScore: number
  area: number
  interval: Interval
  points: { threshold: number | null; falsePositiveRate: number; truePositiveRate: number }[]
}

export interface GradesPerDay {
  /** days that one bin holds: 1, 7 or 28 */
  binDays: number
  bins: { day: string; byLetter: number[]; byGrader: number[] }[]
}

export interface Alert {
  key: string
  /** place in `graders`; null for the campaign */
  grader: number | null
  title: string
  /** the numbers that raised it */
  because: string
  /** what could be done */
  advice: string
}

export interface AgreementReport {
  madeAt: string
  graders: GraderLabel[]
  progress: FinishEstimate
  fit: { source: 'run' | 'report'; converged: boolean; lensShare: number }
  campaign: CampaignAgreement
  pairs: PairAgreement[]
  people: GraderReport[]
  calibration: CalibrationReport
  score: ScoreReport | null
  days: GradesPerDay
  alerts: Alert[]
}
