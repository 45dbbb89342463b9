import { describe, expect, it } from 'vitest'
import { z } from 'zod'
import { listLeftOutNow } from '@/db/queries/left-out'
import { setMembership } from '@/db/queries/people'
import { JOB } from '@/lib/platform/jobs/job-kinds'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { giveGrades } from './_give-grade'
import { leaveOut } from './leave-out'

const REASON = 'Graded on a phone in the sun'

async function rows({ db }: Scenario) {
  const tables = ['left_out', 'job', 'audit_event', 'grade'] as const
  return Promise.all(tables.map((table) => db.selectFrom(table).selectAll().execute()))
}

describe('leaving a grader out of the consensus', () => {
  it('appends a row with the reason, records it, asks for the consensus and touches no grade', async () => {
    const scenario = await makeScenario()
    const { db, campaign, lead, graders } = scenario
    const candidate = await addImagedCandidate(db, campaign, 'a')
    await giveGrades(db, campaign, candidate, graders, 'AB')
    const gradesBefore = await db.selectFrom('grade').selectAll().execute()
    const permit = await scenario.permit(lead, 'lead')
    const answer = await leaveOut(db, permit, { personId: graders[0].id, leftOut: true, reason: ` ${REASON} ` })
    expect(answer.name).toBe('curlew')
    expect(await db.selectFrom('left_out').selectAll().execute()).toMatchObject([
      { campaign_id: campaign.id, person_id: graders[0].id, left_out: 1, reason: REASON, decided_by: lead.id },
    ])
    expect(await listLeftOutNow(db, campaign.id)).toMatchObject([
      { personId: graders[0].id, reason: REASON, decidedBy: 'avocet' },
    ])
    const events = await db.selectFrom('audit_event').selectAll().where('action', 'like', 'consensus.%').execute()
    expect(events).toMatchObject([
      { action: 'consensus.grader-left-out', person_id: lead.id, subject: String(graders[0].id) },
    ])
    const jobs = await db.selectFrom('job').select(['kind', 'campaign_id']).execute()
    expect(jobs).toEqual([{ kind: JOB.consensus, campaign_id: campaign.id }])
    expect(await db.selectFrom('grade').selectAll().execute()).toEqual(gradesBefore)
  })

  it('is taken back by a second row, and both stay', async () => {
    const scenario = await makeScenario()
    const { db, campaign, graders } = scenario
    const permit = await scenario.permit(scenario.lead, 'lead')
    await leaveOut(db, permit, { personId: graders[1].id, leftOut: true, reason: REASON })
    await leaveOut(db, permit, { personId: graders[1].id, leftOut: false, reason: 'It was another person' })
    expect(await listLeftOutNow(db, campaign.id)).toEqual([])
    const stored = await db.selectFrom('left_out').select(['left_out', 'reason']).orderBy('id').execute()
    expect(stored).toEqual([
      { left_out: 1, reason: REASON },
      { left_out: 0, reason: 'It was another person' },
    ])
    await leaveOut(db, permit, { personId: graders[1].id, leftOut: true, reason: REASON })
    expect(await listLeftOutNow(db, campaign.id)).toHaveLength(1)
  })

  it('can be done to somebody whose membership has ended, because their grades count on', async () => {
    const scenario = await makeScenario()
    const { db, campaign, graders } = scenario
    await setMembership(db, campaign.id, graders[0].id, { ended_at: '2026-02-01T00:00:00.000Z' })
    const permit = await scenario.permit(scenario.lead, 'lead')
    await leaveOut(db, permit, { personId: graders[0].id, leftOut: true, reason: REASON })
    expect(await listLeftOutNow(db, campaign.id)).toHaveLength(1)
  })

  it('is refused for somebody who was never a member, and nothing is written', async () => {
    const scenario = await makeScenario()
    const permit = await scenario.permit(scenario.lead, 'lead')
    const before = await rows(scenario)
    for (const personId of [scenario.stranger.id, 9999]) {
      await expect(leaveOut(scenario.db, permit, { personId, leftOut: true, reason: REASON })).rejects.toMatchObject({
        status: 404,
      })
    }
    expect(await rows(scenario)).toEqual(before)
  })

  it('is refused where it is so already, either way, and nothing is written', async () => {
    const scenario = await makeScenario()
    const { db, graders } = scenario
    const permit = await scenario.permit(scenario.lead, 'lead')
    const input = { personId: graders[0].id, reason: REASON }
    await expect(leaveOut(db, permit, { ...input, leftOut: false })).rejects.toMatchObject({
      status: 409,
      type: 'counted-already',
    })
    await leaveOut(db, permit, { ...input, leftOut: true })
    const before = await rows(scenario)
    await expect(leaveOut(db, permit, { ...input, leftOut: true })).rejects.toMatchObject({
      status: 409,
      type: 'left-out-already',
      message: 'curlew is left out of the consensus already. Nothing was changed.',
    })
    expect(await rows(scenario)).toEqual(before)
  })

  it('is refused without a reason or with one that nobody would read, and nothing is written', async () => {
    const scenario = await makeScenario()
    const permit = await scenario.permit(scenario.lead, 'lead')
    const before = await rows(scenario)
    for (const reason of ['', '   ', 'x'.repeat(501)]) {
      const input = { personId: scenario.graders[0].id, leftOut: true, reason }
      await expect(leaveOut(scenario.db, permit, input)).rejects.toBeInstanceOf(z.ZodError)
    }
    expect(await rows(scenario)).toEqual(before)
  })

  it('takes a lead: graders, viewers and leads of other campaigns get no permit for it', async () => {
    const scenario = await makeScenario()
    await expect(scenario.permit(scenario.graders[0], 'lead')).rejects.toMatchObject({ status: 403 })
    await expect(scenario.permit(scenario.reader, 'lead')).rejects.toMatchObject({ status: 403 })
    await expect(scenario.permit(scenario.stranger, 'lead')).rejects.toMatchObject({ status: 404 })
  })

  it('holds in one campaign only', async () => {
    const scenario = await makeScenario()
    const permit = await scenario.permit(scenario.lead, 'lead')
    await leaveOut(scenario.db, permit, { personId: scenario.graders[0].id, leftOut: true, reason: REASON })
    expect(await listLeftOutNow(scenario.db, scenario.otherCampaign.id)).toEqual([])
  })
})
