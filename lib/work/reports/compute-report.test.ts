import { describe, expect, it } from 'vitest'
import { readFixture, readPanel } from '@/lib/science/agreement/_fixtures'
import { fitDawidSkene } from '@/lib/science/agreement/dawid-skene'
import { groupByCandidate } from '@/lib/science/agreement/grade-table'
import { LENS_MODEL } from '@/lib/science/agreement/lens-model'
import { summariseGraders } from '@/lib/science/agreement/grader-summary'
import { giveGrade } from '@/lib/work/consensus/_give-grade'
import { leaveOut } from '@/lib/work/consensus/leave-out'
import { readWhatIf } from '@/lib/work/consensus/what-if'
import { computedReport, NOW, panelScenario, reportScenario } from './_report-scenario'

describe('the agreement report of a campaign', () => {
  it('has each pair’s kappas and number of shared candidates as the reference panel has them', async () => {
    // fixtures/agreement/panel.json: 28 pairs by scikit-learn, alpha by the krippendorff package; see its README.
    const { pairwise_kappa: reference, krippendorff_alpha: alpha } = readFixture('panel.json')
    const { raters } = readPanel()
    const report = await computedReport(await panelScenario())
    expect(report.pairs).toHaveLength(28)
    for (const { pair, n, quadratic, unweighted } of reference.pairs) {
      const [first, second] = pair.map((rater) => raters.indexOf(rater))
      const found = report.pairs.find((one) => one.first === first && one.second === second)
      expect(found?.shared).toBe(n)
      expect(found?.quadratic).toBeCloseTo(quadratic, 10)
      expect(found?.plain).toBeCloseTo(unweighted, 10)
      expect(found?.quadraticInterval?.low).toBeLessThan(quadratic)
      expect(found?.quadraticInterval?.high).toBeGreaterThan(quadratic)
    }
    const found = report.campaign.coefficients.find(({ key }) => key === 'alpha')
    expect(found?.value).toBeCloseTo(alpha.ordinal, 10)
    expect(found?.interval?.low).toBeLessThan(alpha.ordinal)
    expect(found?.interval?.high).toBeGreaterThan(alpha.ordinal)
    // 959 of the 960 ratings are pairable: one item has a single one.
    expect(report.campaign.candidates).toBe(199)
  })

  it('is the same to the last bit when it is made again', async () => {
    const scenario = await panelScenario()
    expect(await computedReport(scenario)).toEqual(await computedReport(scenario))
  })

  it('fits reliabilities as the library does when no run has stored a model', async () => {
    const { ratings, raters } = readPanel()
    const flat = ratings.flatMap((row, candidate) =>
      row.flatMap((grade, grader) => (grade === null ? [] : [{ candidate, grader, grade }])),
    )
    const fit = fitDawidSkene(
      groupByCandidate({
        candidates: ratings.length,
        graders: raters.length,
        grades: 4,
        candidateOf: Int32Array.from(flat, ({ candidate }) => candidate),
        graderOf: Int32Array.from(flat, ({ grader }) => grader),
        gradeOf: Uint8Array.from(flat, ({ grade }) => grade),
      }),
      LENS_MODEL,
    )
    const report = await computedReport(await panelScenario())
    expect(report.fit.source).toBe('report')
    expect(report.fit.converged).toBe(true)
    // One candidate with the 2 % of the prior beside those of the panel.
    const n = ratings.length
    expect(report.fit.lensShare).toBeCloseTo((n * fit.classShares[0] + 0.02) / (n + 1), 5)
    for (const [grader, { lensesSeen, nonLensesSeen, weights }] of summariseGraders(fit).entries()) {
      expect(report.people[grader].lensesSeen.value).toBeCloseTo(lensesSeen.value, 4)
      expect(report.people[grader].nonLensesSeen.value).toBeCloseTo(nonLensesSeen.value, 4)
      expect(report.people[grader].letters[0].weight).toBeCloseTo(weights[0], 3)
    }
  })

  it('finds the share of lenses that trying a rule finds, where no run has stored a model', async () => {
    const stamp = { letters: 'AA', truth: 'lens' as const }
    const scenario = await reportScenario(['AB', 'NN', 'NC', 'NN', stamp, '', ''])
    const { about } = await readWhatIf(scenario.db, await scenario.permit(scenario.lead, 'lead'))
    const { fit } = await computedReport(scenario)
    expect(fit.source).toBe('report')
    expect(fit.lensShare).toBeCloseTo(about.lensShare!, 6)
  })

  it('leaves calibration stamps out of agreement, and counts grades as they stand: corrections once, repeats apart', async () => {
    const scenario = await reportScenario(['AA', 'NN', 'AN', { letters: 'AN', truth: 'lens' }])
    const { db, campaign, graders, ids } = scenario
    const [first] = await db.selectFrom('grade').selectAll().where('candidate_id', '=', ids[2]).execute()
    await giveGrade(db, campaign, ids[2], graders[0], 'N', { replaces: first.id })
    await giveGrade(db, campaign, ids[0], graders[0], 'B', { occasion: 'repeat' })
    await giveGrade(db, campaign, ids[1], graders[0], 'N', { occasion: 'repeat' })
    const report = await computedReport(scenario)
    // By hand: of the three candidates of the search the two now agree on all, one A and two N.
    expect(report.pairs).toEqual([expect.objectContaining({ shared: 3, sameGrade: 1, quadratic: 1, plain: 1 })])
    expect(report.people[0].grades).toBe(4)
    expect(report.people[0].calibrationGrades).toBe(1)
    expect(report.people[0].letters.map(({ given }) => given)).toEqual([2, 0, 0, 2])
    expect(report.people[0].consistency).toMatchObject({ pairs: 2, same: { value: 0.5 } })
    expect(report.people[1].consistency).toBeNull()
  })

  it('counts no grade that came late in agreement, letters or self-consistency', async () => {
    const scenario = await reportScenario(['AA', 'NN', 'AN'])
    const before = await computedReport(scenario)
    const { db, campaign, graders, ids } = scenario
    await giveGrade(db, campaign, ids[2], graders[0], 'N', { occasion: 'late' })
    const after = await computedReport(scenario)
    expect(after.pairs).toEqual(before.pairs)
    expect(after.people[0].letters).toEqual(before.people[0].letters)
    expect(after.people[0].consistency).toBeNull()
  })

  it('judges with the grades that count, and measures who is left out against the others', async () => {
    const letters = [...Array<string>(10).fill('AAAN'), ...Array<string>(30).fill('NNNA')]
    const scenario = await reportScenario(letters)
    const permit = await scenario.permit(scenario.lead, 'lead')
    await leaveOut(scenario.db, permit, { personId: scenario.graders[3].id, leftOut: true, reason: 'Keys swapped' })
    const report = await computedReport(scenario)
    expect(report.isOut).toEqual([false, false, false, true])
    expect(report.campaign.coefficients.find(({ key }) => key === 'alpha')?.value).toBe(1)
    // By hand: 10 lenses seen as N and 30 others as A, over pseudo-counts 7 of 10 and 8.5 of 10.
    expect(report.people[3].lensesSeen.value).toBeCloseTo(7 / 20, 2)
    expect(report.people[3].nonLensesSeen.value).toBeCloseTo(8.5 / 40, 2)
    expect(report.people[0].lensesSeen.value).toBeCloseTo(17 / 20, 2)
  })

  it('reads the rates of the newest run where it stored a model, and those of a newcomer for who is not in it', async () => {
    const scenario = await reportScenario(['AA', 'NN'], 2)
    const { db, campaign, graders } = scenario
    const rule = await db
      .selectFrom('rule')
      .select('id')
      .where('campaign_id', '=', campaign.id)
      .executeTakeFirstOrThrow()
    const newcomer = { lens: [0.4, 0.3, 0.2, 0.1], notLens: [0.05, 0.1, 0.25, 0.6] }
    const model = {
      lensShare: 0.1,
      iterations: 3,
      converged: true,
      logLikelihood: -1,
      graders: [
        {
          personId: graders[0].id,
          grades: 2,
          calibrationGrades: 0,
          lens: [0.8, 0.1, 0.05, 0.05],
          notLens: [0.1, 0.1, 0.2, 0.6],
        },
      ],
      newcomer,
      leftOut: [],
    }
    await db
      .insertInto('run')
      .values({
        campaign_id: campaign.id,
        rule_id: rule.id,
        input_digest: 'x',
        newest_grade_id: 4,
        newest_candidate_id: 2,
        summary: '{}',
        model: JSON.stringify(model),
        started_by: null,
        created_at: '2026-02-01T00:00:00.000Z',
      })
      .execute()
    const report = await computedReport(scenario)
    expect(report.fit).toEqual({ source: 'run', converged: true, lensShare: 0.1 })
    expect(report.people[0].letters[0].weight).toBeCloseTo(Math.log(8), 12)
    expect(report.people[1].letters[0].weight).toBeCloseTo(Math.log(8), 12)
    expect(report.people[1].letters[3].weight).toBeCloseTo(Math.log(0.1 / 0.6), 12)
  })

  it('stands without any grade', async () => {
    const report = await computedReport(await reportScenario(['', '']))
    expect(report.people).toEqual([])
    expect(report.pairs).toEqual([])
    expect(report.days.bins).toEqual([])
    expect(report.score).toBeNull()
    expect(report.campaign.coefficients.every(({ value, note }) => value === null && note !== '')).toBe(true)
    expect(report.madeAt).toBe(new Date(NOW).toISOString())
  })
})
