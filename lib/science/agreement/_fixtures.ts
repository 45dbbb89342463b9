/** What the files of fixtures/agreement hold, for the tests beside this file. */
import { readFileSync } from 'node:fs'

type Weighting = 'unweighted' | 'linear' | 'quadratic'
type Method = 'wilson' | 'wilson_continuity' | 'clopper_pearson' | 'jeffreys'
type Metric = 'nominal' | 'ordinal' | 'interval'
type Ratings = (number | null)[][]

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
  'vote-vectors.json': { vectors: { name: string; counts: number[]; mean: number; population_sd: number }[] }
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
