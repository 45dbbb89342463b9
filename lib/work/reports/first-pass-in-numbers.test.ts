import { beforeEach, describe, expect, it } from 'vitest'
import { OUTCOMES } from '@/lib/science/agreement/outcomes-at-once'
import { RuleInput } from '@/lib/work/campaigns/rule-input'
import { makeSheetScenario, type SheetScenario } from '@/lib/work/sheet/_sheet-scenario'
import { changeSheet } from '@/lib/work/sheet/change-sheet'
import { giveGrade } from '@/lib/work/consensus/_give-grade'
import { leaveOut } from '@/lib/work/consensus/leave-out'
import { previewLeaveOut } from '@/lib/work/consensus/preview-leave-out'
import { runConsensus } from '@/lib/work/consensus/run-consensus'
import { tryRule } from '@/lib/work/consensus/try-rule'
import { readWhatIf } from '@/lib/work/consensus/what-if'
import { withProbabilities } from '@/lib/work/consensus/what-if-columns'
import { agreementReport } from './agreement-report'

const MEAN = RuleInput.parse({ method: 'mean', gradesWanted: 2, leastGrades: 1 })

let scenario: SheetScenario
beforeEach(async () => {
  scenario = await makeSheetScenario(5, 1)
  const { db, campaign, graders, ids } = scenario
  await scenario.mark(graders[0], [0, 1, 2], 'dropped')
  await scenario.mark(graders[1], [1], 'sent on')
  await scenario.mark(graders[0], [3], 'sent on')
  await scenario.mark(graders[0], [5], 'dropped')
  // Somebody had graded the third before it was dropped.
  await giveGrade(db, campaign, ids[2], graders[2], 'A')
  await db.updateTable('candidate').set({ grades_given: 1 }).where('id', '=', ids[2]).execute()
})

const lead = () => scenario.permit(scenario.lead, 'lead')

async function statesNow() {
  const rows = await scenario.db.selectFrom('candidate').select(['id', 'state']).where('truth', 'is', null).execute()
  return new Map(rows.map(({ id, state }) => [id, state]))
}

describe('what if, in a campaign with a first pass', () => {
  it('foretells the run to the candidate: what was not sent on is set aside, what was graded is not', async () => {
    const columns = withProbabilities(await readWhatIf(scenario.db, await lead()))
    const foretold = tryRule(columns, MEAN)
    await runConsensus(scenario.db, await lead())
    const states = await statesNow()
    const came = Object.fromEntries(
      OUTCOMES.map((one) => [one, [...states.values()].filter((state) => state === one).length]),
    )
    expect(came['set aside']).toBe(1)
    expect(foretold.then).toEqual(came)
    expect(foretold.moves.find(({ to }) => to === 'set aside')?.rows.map((row) => columns.ids[row])).toEqual([
      scenario.ids[0],
    ])
    const after = tryRule(withProbabilities(await readWhatIf(scenario.db, await lead())), MEAN)
    expect(after).toMatchObject({ changed: 0, dropped: 1 })
  })

  it('counts nothing as not sent on once the first pass is turned off', async () => {
    await changeSheet(scenario.db, await lead(), { usesSheet: false, passers: [] })
    const columns = withProbabilities(await readWhatIf(scenario.db, await lead()))
    expect([...columns.notSentOn]).toEqual([0, 0, 0, 0, 0, 0])
  })
})

describe('leaving a grader out, in a campaign with a first pass', () => {
  it('is told as the next run does it, what the first pass had dropped included', async () => {
    const { db, graders, ids } = scenario
    await runConsensus(db, await lead())
    expect((await statesNow()).get(ids[2])).toBe('confirmed')
    const { moves } = await previewLeaveOut(db, await lead(), graders[2].id)
    expect(moves).toEqual([{ from: 'confirmed', to: 'set aside', candidates: 1 }])
    await leaveOut(db, await lead(), { personId: graders[2].id, leftOut: true, reason: 'Keys swapped' })
    await runConsensus(db, await lead())
    expect((await statesNow()).get(ids[2])).toBe('set aside')
    const columns = withProbabilities(await readWhatIf(db, await lead()))
    expect(tryRule(columns, MEAN)).toMatchObject({ changed: 0, dropped: 2 })
  })
})

describe('agreement, in a campaign with a first pass', () => {
  const looks = async () => (await agreementReport(scenario.db, await lead())).progress.remaining

  it('expects no look at what was not sent on, and notices a mark that comes without a grade', async () => {
    // Two looks each at the second and fourth, one more at the graded third; three of four were sent on, one waits.
    expect(await looks()).toEqual({ expected: 6.5, least: 5, most: 7 })
    await scenario.mark(scenario.graders[0], [4], 'dropped')
    expect(await looks()).toEqual({ expected: 5, least: 5, most: 5 })
    await changeSheet(scenario.db, await lead(), { usesSheet: false, passers: [] })
    expect((await looks()).most).toBe(9)
  })
})
