import { describe, expect, it } from 'vitest'
import { ruleOnCandidate } from '@/lib/work/rulings/rule-on-candidate'
import { addImagedCandidate, makeScenario } from '@/tests/_support/scenario'
import { decisionRows, giveGrades } from './_give-grade'
import { leaveOut } from './leave-out'
import { previewLeaveOut } from './preview-leave-out'
import { runConsensus } from './run-consensus'

const RULE = { gradesWanted: 4, leastGrades: 3, confirmMean: 2, setAsideMean: 1, splitSpread: 1 }

async function judgedScenario() {
  const scenario = await makeScenario(RULE)
  const { db, campaign, graders } = scenario
  const permit = await scenario.permit(scenario.lead, 'lead')
  // Without the fourth grader: torn is three A, near is three N, and lean has two grades only.
  for (const [name, letters] of Object.entries({ torn: 'AAAN', near: 'NNNA', lean: 'AA.A', sure: 'AAAA' })) {
    const id = await addImagedCandidate(db, campaign, name)
    for (const [at, letter] of [...letters].entries()) {
      if (letter !== '.') await giveGrades(db, campaign, id, [graders[at]], letter)
    }
  }
  await runConsensus(db, permit)
  return { ...scenario, permit }
}

describe('what leaving a grader out would change', () => {
  it('is told before it is done, writes nothing, and is what the next run then does', async () => {
    const { db, permit, graders } = await judgedScenario()
    const before = await decisionRows(db)
    const preview = await previewLeaveOut(db, permit, graders[3].id)
    expect(await decisionRows(db)).toEqual(before)
    // By hand: AAAN and NNNA have a spread of 1.3, above 1, and are split with the fourth grade, clear without it; lean falls
    // below three grades.
    expect(preview).toMatchObject({ name: 'whimbrel', looks: 4, leftOut: null, keptByRuling: 0 })
    expect(preview.moves).toHaveLength(3)
    expect(preview.moves).toEqual(
      expect.arrayContaining([
        { from: 'split', to: 'confirmed', candidates: 1 },
        { from: 'split', to: 'set aside', candidates: 1 },
        { from: 'confirmed', to: 'open', candidates: 1 },
      ]),
    )
    await leaveOut(db, permit, { personId: graders[3].id, leftOut: true, reason: 'Keys swapped' })
    await runConsensus(db, permit)
    const states = await db.selectFrom('candidate').select(['name', 'state']).orderBy('id').execute()
    expect(Object.fromEntries(states.map(({ name, state }) => [name, state]))).toEqual({
      torn: 'confirmed',
      near: 'set aside',
      lean: 'open',
      sure: 'confirmed',
    })
    const back = await previewLeaveOut(db, permit, graders[3].id)
    expect(back.leftOut).toMatchObject({ reason: 'Keys swapped' })
    expect(back.moves).toEqual(expect.arrayContaining([{ from: 'open', to: 'confirmed', candidates: 1 }]))
  })

  it('puts nothing down to the person that grades since the newest run change by themselves', async () => {
    const { db, campaign, permit, graders } = await judgedScenario()
    // Four N since the run: set aside with the fourth grader and without. 'own' is confirmed by A, A, A, B and by A, A, A.
    for (const [name, letters] of Object.entries({ fresh: 'NNNN', own: 'AAAB' })) {
      await giveGrades(db, campaign, await addImagedCandidate(db, campaign, name), graders, letters)
    }
    const { moves } = await previewLeaveOut(db, permit, graders[3].id)
    expect(moves).not.toContainEqual(expect.objectContaining({ from: 'open' }))
    expect(moves.reduce((sum, { candidates }) => sum + candidates, 0)).toBe(3)
  })

  it('is the same when it is asked for again, and another once a grade or a ruling has come', async () => {
    const { db, campaign, permit, graders } = await judgedScenario()
    const first = await previewLeaveOut(db, permit, graders[3].id)
    expect(await previewLeaveOut(db, permit, graders[3].id)).toEqual(first)
    const id = await addImagedCandidate(db, campaign, 'two and one')
    await giveGrades(db, campaign, id, [graders[0], graders[1], graders[3]], 'AAA')
    const second = await previewLeaveOut(db, permit, graders[3].id)
    expect(second.moves).toContainEqual({ from: 'confirmed', to: 'open', candidates: 2 })
    await ruleOnCandidate(db, permit, id, { outcome: 'set aside', grade: null, reason: 'A spiral arm' })
    const third = await previewLeaveOut(db, permit, graders[3].id)
    expect(third.keptByRuling).toBe(1)
    expect(third.moves).toContainEqual({ from: 'confirmed', to: 'open', candidates: 1 })
  })

  it('counts a candidate that only this person’s grades since the newest run decide', async () => {
    const { db, campaign, permit, graders } = await judgedScenario()
    const id = await addImagedCandidate(db, campaign, 'two and one')
    await giveGrades(db, campaign, id, [graders[0], graders[1], graders[3]], 'AAA')
    const { moves } = await previewLeaveOut(db, permit, graders[3].id)
    // It and lean are confirmed with the fourth grader's A, and have two grades without it.
    expect(moves).toContainEqual({ from: 'confirmed', to: 'open', candidates: 2 })
  })

  it('counts apart the verdicts under rulings, which keep their candidates as they are', async () => {
    const { db, permit, graders } = await judgedScenario()
    const torn = await db.selectFrom('candidate').select('id').where('name', '=', 'torn').executeTakeFirstOrThrow()
    await ruleOnCandidate(db, permit, torn.id, { outcome: 'set aside', grade: null, reason: 'A spiral arm' })
    const preview = await previewLeaveOut(db, permit, graders[3].id)
    expect(preview.keptByRuling).toBe(1)
    expect(preview.moves).not.toContainEqual(expect.objectContaining({ to: 'confirmed' }))
    expect(preview.moves).toHaveLength(2)
  })

  it('changes nothing where the person has not graded', async () => {
    const { db, permit, lead } = await judgedScenario()
    expect(await previewLeaveOut(db, permit, lead.id)).toMatchObject({ looks: 0, moves: [], keptByRuling: 0 })
  })

  it('is refused for somebody who was never a member', async () => {
    const { db, permit, stranger } = await judgedScenario()
    await expect(previewLeaveOut(db, permit, stranger.id)).rejects.toMatchObject({ status: 404 })
  })
})
