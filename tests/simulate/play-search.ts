/**
 * A simulated search graded through the product: its own queue says who sees what next, its own grades are kept, its own consensus
 * learns the reliabilities and decides. The graders say what the search has them say, and nothing else is known of them.
 */
import { GRADES } from '@/lib/science/agreement/grades'
import { qualityOf, type CatalogueQuality, type SimulatedSearch } from '@/lib/science/agreement/simulated-search'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'
import type { RuleInput } from '@/lib/work/campaigns/rule-input'
import { runConsensus } from '@/lib/work/consensus/run-consensus'
import { GradeInput } from '@/lib/work/grading/grade-input'
import { recordGrade } from '@/lib/work/grading/record-grade'
import { lendNext } from '@/lib/work/queue/lend-next'
import { openSearch, type SearchSite } from './survey-of-search'

/** Candidates that a grader asks for and grades in a row. */
const SITTING = 20
/** The consensus runs when the looks have grown by this share since its last run, and when the queue is empty. */
const RUN_SHARE = 0.1
const FIRST_RUN = 200

export interface PlayedSearch extends CatalogueQuality {
  /** mean looks at a candidate, calibration stamps not counted */
  looksPerCandidate: number
  /** looks at calibration stamps over candidates */
  calibrationLooksPerCandidate: number
  /** candidates that were left split or open; a lead who goes by the lens probability rules on them */
  undecided: number
  runs: number
  seconds: number
}

const answer = GRADES.map((grade) => GradeInput.parse({ grade }))

export async function playSearch(search: SimulatedSearch, rule: RuleInput): Promise<PlayedSearch> {
  const site = await openSearch(search, rule)
  try {
    return await new Play(search, site).run()
  } finally {
    await site.db.destroy()
  }
}

class Play {
  private readonly random: SeededRandom
  private looks = 0
  private calibrationLooks = 0
  private looksInRun = 0
  private runs = 0

  constructor(
    private readonly search: SimulatedSearch,
    private readonly site: SearchSite,
  ) {
    this.random = new SeededRandom(search.scenario.seed + 4)
  }

  async run(): Promise<PlayedSearch> {
    const started = performance.now()
    for (;;) {
      const before = this.looks
      for (const grader of this.shuffled()) {
        await this.sit(grader)
        if (this.looks - this.looksInRun >= Math.max(FIRST_RUN, RUN_SHARE * this.looksInRun)) await this.consensus()
      }
      if (this.looks > before) continue
      // A last run may open candidates again.
      if (this.looks === this.looksInRun) break
      await this.consensus()
    }
    const { candidates } = this.search.scenario
    const { confirmed, undecided } = await this.catalogue()
    return {
      ...qualityOf(this.search, (candidate) => confirmed.has(candidate)),
      looksPerCandidate: (this.looks - this.calibrationLooks) / candidates,
      calibrationLooksPerCandidate: this.calibrationLooks / candidates,
      undecided,
      runs: this.runs,
      seconds: (performance.now() - started) / 1000,
    }
  }

  private async sit(grader: number): Promise<void> {
    const { db, graders, stampOf } = this.site
    const { candidates, graders: count } = this.search.scenario
    const lent = await lendNext(db, graders[grader], SITTING)
    for (const { id } of lent.candidates) {
      const stamp = stampOf.get(id) as number
      await recordGrade(db, graders[grader], id, answer[this.search.says[stamp * count + grader]])
      this.looks += 1
      if (stamp >= candidates) this.calibrationLooks += 1
    }
  }

  private async consensus(): Promise<void> {
    await runConsensus(this.site.db, this.site.lead)
    this.looksInRun = this.looks
    this.runs += 1
  }

  private async catalogue(): Promise<{ confirmed: Set<number>; undecided: number }> {
    const rows = await this.site.db
      .selectFrom('candidate')
      .leftJoin('estimate', 'estimate.candidate_id', 'candidate.id')
      .select(['candidate.id', 'candidate.state', 'estimate.probability'])
      .where('candidate.truth', 'is', null)
      .execute()
    const confirmed = new Set<number>()
    let undecided = 0
    for (const { id, state, probability } of rows) {
      const isUndecided = state === 'open' || state === 'split'
      if (isUndecided) undecided += 1
      if (state === 'confirmed' || (isUndecided && (probability ?? 0) >= 0.5)) {
        confirmed.add(this.site.stampOf.get(id) as number)
      }
    }
    return { confirmed, undecided }
  }

  private shuffled(): number[] {
    const order = this.site.graders.map((_, grader) => grader)
    for (let at = order.length - 1; at > 0; at--) {
      const other = this.random.integer(0, at)
      ;[order[at], order[other]] = [order[other], order[at]]
    }
    return order
  }
}
