import { beforeEach, expect, it } from 'vitest'
import { fromJson } from '@/db/schema/values'
import { runConsensus } from '@/lib/work/consensus/run-consensus'
import { lendNext } from '@/lib/work/queue/lend-next'
import { makeSheetScenario, type SheetScenario } from '@/lib/work/sheet/_sheet-scenario'
import { changeSheet } from '@/lib/work/sheet/change-sheet'
import { sendOn } from '@/lib/work/sheet/send-on'
import { countersAndRecount } from '@/tests/_support/recount-queue'
import { ruleOnCandidate } from './rule-on-candidate'
import type { RulingInput } from './ruling-input'

let scenario: SheetScenario
beforeEach(async () => {
  scenario = await makeSheetScenario(2)
  await scenario.mark(scenario.graders[0], [0], 'dropped')
  await runConsensus(scenario.db, await lead())
})

const lead = () => scenario.permit(scenario.lead, 'lead')
const rule = async (place: number, outcome: RulingInput['outcome']) =>
  ruleOnCandidate(scenario.db, await lead(), scenario.ids[place], {
    outcome,
    grade: outcome === 'confirmed' ? 'B' : null,
    reason: 'There may be a faint arc.',
  })
const lent = async () => {
  const { candidates } = await lendNext(scenario.db, await scenario.permit(scenario.graders[3], 'grade'), 5)
  return candidates.map(({ id }) => id)
}

it('reopening what the first pass dropped sends it on, so that graders are lent it, and a run leaves it open', async () => {
  expect(await lent()).toEqual([])
  expect(await rule(0, 'open')).toMatchObject({ state: 'open', sentOn: true })
  expect(await lent()).toEqual([scenario.ids[0]])
  await runConsensus(scenario.db, await lead())
  expect(await scenario.stateOf(0)).toBe('sent on')
  // Handed back to the verdict it stays open too: somebody has sent it on.
  expect(await rule(0, 'by verdict')).toMatchObject({ state: 'open', sentOn: false })
  const { kept, counted } = await countersAndRecount(scenario.db)
  expect(kept).toEqual(counted)
})

it('keeps that as a mark of the lead and in the record', async () => {
  const { rulingId } = await rule(0, 'open')
  const marks = await scenario.db.selectFrom('sheet_mark').select(['person_id', 'mark']).orderBy('id').execute()
  expect(marks).toEqual([
    { person_id: scenario.graders[0].id, mark: 'dropped' },
    { person_id: scenario.lead.id, mark: 'sent on' },
  ])
  const event = await scenario.db
    .selectFrom('audit_event')
    .select('detail')
    .where('action', '=', 'rulings.ruled')
    .executeTakeFirstOrThrow()
  expect(fromJson(event.detail)).toMatchObject({ ruling: rulingId, sentOn: true })
})

it('sends nothing on that waits for the first pass or that another ruling decides', async () => {
  await rule(1, 'open')
  expect(await scenario.stateOf(1)).toBe('waiting')
  await rule(0, 'confirmed')
  expect(await scenario.stateOf(0)).toBe('dropped')
})

it('holds when the first pass was off meanwhile', async () => {
  await changeSheet(scenario.db, await lead(), { usesSheet: false, passers: [] })
  await rule(0, 'open')
  await changeSheet(scenario.db, await lead(), { usesSheet: true, passers: [scenario.graders[0].id] })
  expect(await lent()).toEqual([scenario.ids[0]])
})

it('a lead sends on without a ruling too, once, and the consensus is asked for at once', async () => {
  await scenario.db.deleteFrom('job').execute()
  await sendOn(scenario.db, await lead(), scenario.ids[0])
  expect(await scenario.stateOf(0)).toBe('sent on')
  const job = await scenario.db.selectFrom('job').select(['kind', 'run_after']).executeTakeFirstOrThrow()
  expect(job.kind).toBe('consensus')
  expect(Date.parse(job.run_after)).toBeLessThanOrEqual(Date.now())
  await expect(sendOn(scenario.db, await lead(), scenario.ids[0])).rejects.toMatchObject({
    status: 409,
    type: 'not-dropped',
  })
})

it('leaves it dropped when somebody rules who may not', async () => {
  await expect(scenario.permit(scenario.graders[0], 'lead')).rejects.toMatchObject({ status: 403 })
  expect(await scenario.stateOf(0)).toBe('dropped')
})
