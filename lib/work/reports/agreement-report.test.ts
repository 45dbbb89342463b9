import { describe, expect, it } from 'vitest'
import { leaveOut } from '@/lib/work/consensus/leave-out'
import { giveGrade } from '@/lib/work/consensus/_give-grade'
import { NOW, reportScenario } from './_report-scenario'
import { agreementReport } from './agreement-report'

const REASON = 'curlew was ill'

describe('who sees the agreement report', () => {
  it('names graders to leads, with the reason for leaving one out', async () => {
    const scenario = await reportScenario(['AB', 'NN'])
    const permit = await scenario.permit(scenario.lead, 'lead')
    await leaveOut(scenario.db, permit, { personId: scenario.graders[0].id, leftOut: true, reason: REASON })
    const report = await agreementReport(scenario.db, permit, NOW)
    expect(report.graders.map(({ label }) => label)).toEqual(['curlew', 'dunlin'])
    expect(report.graders[0]).toMatchObject({
      personId: scenario.graders[0].id,
      leftOut: { by: 'avocet', reason: REASON },
    })
    expect(report.graders[1].leftOut).toBeNull()
  })

  it('tells viewers pseudonyms only: no name, no number of a person and no reason is in what they get', async () => {
    const scenario = await reportScenario(['AB', 'NN'])
    const lead = await scenario.permit(scenario.lead, 'lead')
    await leaveOut(scenario.db, lead, { personId: scenario.graders[0].id, leftOut: true, reason: REASON })
    const report = await agreementReport(scenario.db, await scenario.permit(scenario.reader, 'read'), NOW)
    expect(report.graders).toEqual([
      { label: 'G02', ended: false, personId: null, leftOut: expect.objectContaining({ by: null, reason: null }) },
      { label: 'G03', ended: false, personId: null, leftOut: null },
    ])
    expect(JSON.stringify(report)).not.toMatch(/curlew|dunlin|avocet|personIds/)
  })

  it('is refused to graders', async () => {
    const scenario = await reportScenario(['AB'])
    const permit = await scenario.permit(scenario.graders[0], 'grade')
    await expect(agreementReport(scenario.db, permit, NOW)).rejects.toMatchObject({ status: 403 })
  })
})

describe('a report that is kept', () => {
  it('is given again while nothing has come, and made anew for a grade, a decision on leaving out, and after ten minutes', async () => {
    const scenario = await reportScenario(['AB', 'NN'])
    const { db, campaign, graders, ids } = scenario
    const permit = await scenario.permit(scenario.lead, 'lead')
    const first = await agreementReport(db, permit, NOW)
    expect((await agreementReport(db, permit, NOW + 60_000)).madeAt).toBe(first.madeAt)
    await giveGrade(db, campaign, ids[0], graders[2], 'A')
    const second = await agreementReport(db, permit, NOW + 120_000)
    expect(second.graders).toHaveLength(3)
    expect(second.madeAt).toBe(new Date(NOW + 120_000).toISOString())
    await leaveOut(db, permit, { personId: graders[0].id, leftOut: true, reason: REASON })
    const third = await agreementReport(db, permit, NOW + 130_000)
    expect(third.madeAt).toBe(new Date(NOW + 130_000).toISOString())
    expect(third.graders[0].leftOut).not.toBeNull()
    const later = await agreementReport(db, permit, NOW + 130_000 + 11 * 60_000)
    expect(later.madeAt).not.toBe(third.madeAt)
  })
})
