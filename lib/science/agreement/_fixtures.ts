/** What the files of fixtures/agreement hold, for the tests beside this file. */
import { readFileSync } from 'node:fs'

type Weighting = 'unweighted' | 'linear' | 'quadratic'
type Method = 'wilson' | 'wilson_continuity' | 'clopper_pearson' | 'jeffreys'
type Metric = 'nominal' | 'ordinal' | 'interval'
type Ratings = (number | null)[][]

interface VoteMeasures {
  entropy_bits: number
  van_der_eijk_A: number
  consensus: number
}

interface Fixtures {
  'fleiss-1971.json': {
    counts: number[][]
    expected: { published_kappa: number; mean_observed_agreement: number; chance_agreement: number }
  }
  'krippendorff-2011.json': {
    sets: Record<
      'A' | 'B' | 'C' | 'three_coders_15_units',
      {
        raters: Ratings
        published: Partial<Record<Metric, number>>
        pairable: number
        alpha: Partial<Record<Metric, { value: number }>>
      }
    >
  }
  'cohen-kappa.json': {
    tables: {
      name: string
      table: number[][]
      observed: number
      chance: number
      published: { unweighted?: number; linear?: number }
      kappa: Record<Weighting, { kappa: number }>
      custom: { weights: number[][]; kappa: number; published: number }[]
    }[]
    rating_vectors: { vectors: { rater1: number[]; rater2: number[]; kappa_quadratic: number; exact: string }[] }
  }
  'gwet-missing.json': {
    sets: {
      name: string
      ratings: Ratings
      percent_agreement: number
      fleiss_irrCAC?: { pa: number; pe: number; kappa: number }
    }[]
  }
  'binomial-intervals.json': {
    z: number
    rows: (Record<Method, [number, number]> & {
      x: number
      n: number
      published_4dp?: Partial<Record<Method, [number, number]>>
    })[]
    other_levels: (Partial<Record<Method, [number, number]>> & { x: number; n: number; level: number })[]
  }
  'dawid-skene-1979.json': {
    /** one row a patient; the first three columns are observer 1's */
    ratings: number[][]
    published: { class_marginals: number[]; error_rates: number[][][]; posteriors: number[][]; hard_classes: number[] }
    fit: {
      log_likelihood: number
      iterations_to_posterior_change_below_1e_10: number
      class_marginals: number[]
      error_rates: number[][][]
      posteriors: number[][]
    }
    tolerance: number
  }
  'panel-dawid-skene.json': {
    iterations_1e_10: number
    log_likelihood: number
    class_marginals: number[]
    confusions: Record<string, number[][]>
    posteriors: Record<string, number[]>
  }
  'sequential-bayes.json': {
    examples: {
      name: string
      prior: number
      votes: { tpr: number; fpr: number; vote: 'yes' | 'no' | null }[]
      posterior: number
      log_odds: number | null
      steps: number[]
    }[]
  }
  'gwet-ac.json': {
    sets: {
      name: string
      categories?: number[]
      ratings?: Ratings
      table?: number[][]
      published: { ac1?: number; ac2_quadratic?: number }
      values: Partial<Record<'identity' | 'linear' | 'quadratic', { ac: number; pa: number; pe: number }>>
    }[]
  }
  'roc-calibration.json': {
    label: number[]
    score: number[]
    auc: number
    roc_points: { threshold: (number | null)[]; fpr: number[]; tpr: number[] }
    brier: number
    log_loss_natural: number
    calibration_5_uniform_bins: Record<
      'right_closed' | 'left_closed',
      {
        bins: { count: number; mean_predicted: number; fraction_positive: number }[]
        expected_calibration_error: number
      }
    >
  }
  'vote-vectors.json': {
    vectors: ({ name: string; counts: number[]; mean: number; population_sd: number } & VoteMeasures)[]
    printed_examples: ({
      counts: number[]
      published: { A: number; consensus?: number }
      where: string
    } & VoteMeasures)[]
  }
  'panel.json': {
    krippendorff_alpha: Record<Metric | 'pairable', number>
    pairwise_kappa: { pairs: (Record<Weighting, number> & { pair: string[]; n: number })[] }
  }
}

export function readFixture<Name extends keyof Fixtures>(name: Name): Fixtures[Name] {
  return JSON.parse(readFileSync(`fixtures/agreement/${name}`, 'utf8')) as Fixtures[Name]
}

/** The seeded panel: one row an item, one place a rater, null where missing. */
export function readPanel(): { raters: string[]; ratings: Ratings } {
  const lines = readFileSync('fixtures/agreement/panel-ratings.csv', 'utf8').trim().split(/\r?\n/)
  const [header, ...rows] = lines.map((line) => line.split(',').slice(1))
  return { raters: header, ratings: rows.map((row) => row.map((cell) => (cell === '' ? null : Number(cell)))) }
}

/** The classes from which the panel was drawn, item by item. */
export function readPanelTruth(): number[] {
  const lines = readFileSync('fixtures/agreement/panel-truth.csv', 'utf8').trim().split(/\r?\n/)
  return lines.slice(1).map((line) => Number(line.split(',')[1]))
}
