/**
 * Looks that a sequential test takes in a simulated search, with reliabilities learned on the way.
 *
 * In each round every open candidate gets one look. The graders come in a drawn order and take equal shares; each is given
 * the candidates on which a look of theirs most likely settles more than another's would. A share of looks goes to
 * calibration stamps. When the looks have grown by a tenth, the reliability model is fitted again to all grades and the
 * known truths, and every candidate is weighed anew: one may open again. It ends when all are settled or have the most
 * looks; those between the boundaries then are confirmed where a lens is the likelier.
 */
import { fitDawidSkene, type DawidSkeneFit } from '@/lib/science/agreement/dawid-skene'
import { UNKNOWN_TRUTH } from '@/lib/science/agreement/dawid-skene-options'
import type { GradesByCandidate } from '@/lib/science/agreement/grade-table'
import { LENS, LENS_MODEL, NOT_A_LENS, ratesOfGraders, type GraderRates } from '@/lib/science/agreement/lens-model'
import { gradeWeights, logOddsOf, probabilityOf } from '@/lib/science/agreement/posterior'
import { boundariesReaching, lookSteps } from '@/lib/science/agreement/sample-number'
import { errorRatesFor, waldBoundaries, type Boundaries } from '@/lib/science/agreement/sequential-test'
import { qualityOf, type CatalogueQuality, type SimulatedSearch } from '@/lib/science/agreement/simulated-search'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'

/** The model is fitted again when the looks have grown by this share, and when all seems settled. */
const REFIT_SHARE = 0.1

export interface LookOptions {
  /** what the catalogue should be; each inside (0, 1) */
  goal: { completeness: number; purity: number }
  /** 'wald': his boundaries for the goal; 'reached': the narrower ones that reach it under the rates of the moment */
  boundaries: 'wald' | 'reached'
  leastLooks: number
  /** at most the number of graders, who look once each */
  mostLooks: number
  /** looks at calibration stamps for each look at a candidate, in the first rounds, until every stamp is done by all */
  calibrationShare: number
  /** 'learned' from grades and calibration stamps, or 'known' for comparison */
  reliabilities: 'learned' | 'known'
  assignment: 'random' | 'settle'
}

export interface LookReport extends CatalogueQuality {
  /** mean looks at a candidate, calibration stamps not counted */
  looksPerCandidate: number
  /** looks at calibration stamps over candidates */
  calibrationLooksPerCandidate: number
  /** candidates still between the boundaries after the most looks */
  undecided: number
  /** share of lenses that the model estimates; the given one where reliabilities are known */
  lensShare: number
  rounds: number
}

export function simulateLooks(search: SimulatedSearch, options: LookOptions): LookReport {
  return new Simulation(search, options).run()
}

class Simulation {
  private readonly random: SeededRandom
  private readonly stamps: number
  private readonly looks: Uint8Array
  /** bit g is set when grader g has looked */
  private readonly seenBy: Uint32Array
  private readonly evidence: Float64Array
  private readonly usualChance: Float64Array
  private readonly gain: Float64Array
  private rates: GraderRates[]
  private weights: number[][]
  private lensShare: number
  private fit: DawidSkeneFit | null = null
  private calibrationLooks = 0
  private looksInFit = 0
  private looksSinceFit = 0
  private boundaries: Boundaries = { upper: 0, lower: 0 }

  constructor(
    private readonly search: SimulatedSearch,
    private readonly options: LookOptions,
  ) {
    const { scenario } = search
    this.random = new SeededRandom(scenario.seed + 2)
    this.stamps = search.isLens.length
    this.looks = new Uint8Array(this.stamps)
    this.seenBy = new Uint32Array(this.stamps)
    this.evidence = new Float64Array(this.stamps)
    this.usualChance = new Float64Array(this.stamps)
    this.gain = new Float64Array(this.stamps)
    const known = options.reliabilities === 'known'
    this.lensShare = known ? scenario.lensShare : 0.02
    this.rates = known ? search.graders : []
    this.weights = this.rates.map(gradeWeights)
    this.learn()
  }

  private setBoundaries(): void {
    const { goal, boundaries, leastLooks, mostLooks } = this.options
    const rates = errorRatesFor(goal, this.lensShare)
    this.boundaries =
      boundaries === 'wald'
        ? waldBoundaries(rates)
        : boundariesReaching(rates, lookSteps(this.rates), { leastLooks, mostLooks })
  }

  run(): LookReport {
    const { candidates } = this.search.scenario
    let rounds = 0
    for (;;) {
      const open = this.openCandidates()
      if (open.length > 0) {
        this.shareOut(open)
        this.calibrate(Math.round(open.length * this.options.calibrationShare))
        rounds += 1
      } else if (this.looksSinceFit === 0) break
      if (open.length === 0 || this.looksSinceFit >= REFIT_SHARE * this.looksInFit) this.learn()
    }
    let total = 0
    let undecided = 0
    const { upper, lower } = this.boundaries
    for (let candidate = 0; candidate < candidates; candidate++) {
      total += this.looks[candidate]
      if (this.evidence[candidate] < upper && this.evidence[candidate] > lower) undecided += 1
    }
    return {
      ...qualityOf(this.search, (candidate) => this.isConfirmed(candidate)),
      looksPerCandidate: total / candidates,
      calibrationLooksPerCandidate: this.calibrationLooks / candidates,
      undecided,
      lensShare: this.lensShare,
      rounds,
    }
  }

  private isConfirmed(candidate: number): boolean {
    const { upper, lower } = this.boundaries
    const evidence = this.evidence[candidate]
    return evidence >= upper || (evidence > lower && logOddsOf(this.lensShare) + evidence >= 0)
  }

  private openCandidates(): number[] {
    const { leastLooks, mostLooks } = this.options
    const { boundaries } = this
    const open: number[] = []
    for (let candidate = 0; candidate < this.search.scenario.candidates; candidate++) {
      const evidence = this.evidence[candidate]
      const settled = evidence >= boundaries.upper || evidence <= boundaries.lower
      if (this.looks[candidate] < mostLooks && (!settled || this.looks[candidate] < leastLooks)) open.push(candidate)
    }
    return open
  }

  /** One round: equal shares, graders in a drawn order. */
  private shareOut(open: number[]): void {
    const graders = this.shuffled(this.search.scenario.graders)
    if (this.options.assignment === 'settle') this.setUsualChances(open)
    let left = open
    for (const [turn, grader] of graders.entries()) {
      const share = Math.ceil(left.length / (graders.length - turn))
      const able = left.filter((candidate) => !(this.seenBy[candidate] & (1 << grader)))
      const given = new Set(this.choose(able, grader, share))
      for (const candidate of given) this.look(candidate, grader)
      left = left.filter((candidate) => !given.has(candidate))
    }
  }

  private choose(able: number[], grader: number, share: number): number[] {
    for (let at = able.length - 1; at > 0; at--) {
      const other = this.random.integer(0, at)
      ;[able[at], able[other]] = [able[other], able[at]]
    }
    if (this.options.assignment === 'random') return able.slice(0, share)
    for (const candidate of able) this.gain[candidate] = this.chance(candidate, grader) - this.usualChance[candidate]
    return able.sort((a, b) => this.gain[b] - this.gain[a]).slice(0, share)
  }

  /** Chance that a look by a grader drawn at random settles the candidate. */
  private setUsualChances(open: number[]): void {
    const { graders } = this.search.scenario
    for (const candidate of open) {
      let sum = 0
      for (let grader = 0; grader < graders; grader++) sum += this.chance(candidate, grader)
      this.usualChance[candidate] = sum / graders
    }
  }

  private chance(candidate: number, grader: number): number {
    const { upper, lower } = this.boundaries
    const evidence = this.evidence[candidate]
    const p = probabilityOf(logOddsOf(this.lensShare) + evidence)
    const { lens, notLens } = this.rates[grader]
    let chance = 0
    for (let grade = 0; grade < 4; grade++) {
      const after = evidence + this.weights[grader][grade]
      if (after >= upper || after <= lower) chance += p * lens[grade] + (1 - p) * notLens[grade]
    }
    return chance
  }

  private look(stamp: number, grader: number): void {
    this.looksSinceFit += 1
    this.looks[stamp] += 1
    this.seenBy[stamp] |= 1 << grader
    this.evidence[stamp] += this.weights[grader][this.search.says[stamp * this.search.scenario.graders + grader]]
  }

  private calibrate(looks: number): void {
    const { candidates, graders } = this.search.scenario
    let left = looks
    for (let stamp = candidates; stamp < this.stamps && left > 0; stamp++) {
      for (const grader of this.shuffled(graders)) {
        if (left === 0 || this.seenBy[stamp] & (1 << grader)) continue
        this.look(stamp, grader)
        this.calibrationLooks += 1
        left -= 1
      }
    }
  }

  private learn(): void {
    const { scenario, isLens } = this.search
    this.looksInFit += this.looksSinceFit
    this.looksSinceFit = 0
    if (this.options.reliabilities === 'known') return this.setBoundaries()
    const truth = Int8Array.from(isLens, (lens, stamp) =>
      stamp < scenario.candidates ? UNKNOWN_TRUTH : lens ? LENS : NOT_A_LENS,
    )
    this.fit = fitDawidSkene(this.table(), { ...LENS_MODEL, truth, tolerance: 1e-4, from: this.fit ?? undefined })
    this.rates = ratesOfGraders(this.fit)
    this.weights = this.rates.map(gradeWeights)
    if (this.looksInFit > 0) this.lensShare = this.fit.classShares[LENS]
    this.setBoundaries()
    for (let stamp = 0; stamp < this.stamps; stamp++) {
      this.evidence[stamp] = 0
      for (let grader = 0; grader < scenario.graders; grader++) {
        if (!(this.seenBy[stamp] & (1 << grader))) continue
        this.evidence[stamp] += this.weights[grader][this.search.says[stamp * scenario.graders + grader]]
      }
    }
  }

  private table(): GradesByCandidate {
    const { graders } = this.search.scenario
    const start = new Int32Array(this.stamps + 1)
    for (let stamp = 0; stamp < this.stamps; stamp++) start[stamp + 1] = start[stamp] + this.looks[stamp]
    const cell = new Int32Array(start[this.stamps])
    let entry = 0
    for (let stamp = 0; stamp < this.stamps; stamp++) {
      for (let grader = 0; grader < graders; grader++) {
        if (this.seenBy[stamp] & (1 << grader)) cell[entry++] = grader * 4 + this.search.says[stamp * graders + grader]
      }
    }
    return { candidates: this.stamps, graders, grades: 4, start, cell }
  }

  private shuffled(count: number): number[] {
    const order = Array.from({ length: count }, (_, at) => at)
    for (let at = count - 1; at > 0; at--) {
      const other = this.random.integer(0, at)
      ;[order[at], order[other]] = [order[other], order[at]]
    }
    return order
  }
}
