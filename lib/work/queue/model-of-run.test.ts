import { expect, it } from 'vitest'
import { requireRule } from '@/db/queries/campaigns'
import { insertRun } from '@/db/queries/consensus'
import type { RunModel, RunSummary } from '@/db/schema/consensus'
import { makeScenario } from '@/tests/_support/scenario'
import { newcomerRates } from './lens-estimate'
import { newestModel } from './model-of-run'

const SUMMARY = { candidates: 0 } as RunSummary
const modelWith = (lensShare: number): RunModel => ({
  lensShare,
  iterations: 1,
  converged: true,
  logLikelihood: 0,
  graders: [],
  newcomer: newcomerRates(),
  leftOut: [],
})

it('is the model of the newest run, though an earlier run had the same input', async () => {
  const { db, campaign } = await makeScenario()
  const rule = await requireRule(db, campaign.id)
  const run = (lensShare: number | null) =>
    insertRun(db, {
      campaignId: campaign.id,
      ruleId: rule.id,
      inputDigest: 'a'.repeat(64),
      newestGradeId: 0,
      newestCandidateId: 0,
      summary: SUMMARY,
      model: lensShare === null ? null : modelWith(lensShare),
      startedBy: null,
      now: '2026-01-02T00:00:00.000Z',
    })
  expect(await newestModel(db, campaign.id)).toBeNull()
  await run(0.1)
  expect((await newestModel(db, campaign.id))?.model.lensShare).toBe(0.1)
  const second = await run(0.2)
  const newest = await newestModel(db, campaign.id)
  expect(newest).toMatchObject({ runId: second.id, model: { lensShare: 0.2 } })
  // Read once: the second asking gets the same object.
  expect((await newestModel(db, campaign.id))?.model).toBe(newest?.model)
  await run(null)
  expect(await newestModel(db, campaign.id)).toBeNull()
})
