import fc from 'fast-check'
import { beforeEach, describe, expect, it } from 'vitest'
import { GradeInput } from '@/lib/work/grading/grade-input'
import { recordGrade } from '@/lib/work/grading/record-grade'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { giveBack } from './give-back'
import { lendNext } from './lend-next'
import { blockAt, blocksFor, spreadRange, shuffledBy } from './shuffled-order'

let scenario: Scenario
let ids: number[]

async function campaignOf(candidates: number, order: 'most needed' | 'score' | 'shuffled'): Promise<void> {
  scenario = await makeScenario({ gradesWanted: 3, leastGrades: 1 })
  ids = []
  for (let n = 0; n < candidates; n++) ids.push(await addImagedCandidate(scenario.db, scenario.campaign, `SWS-${n}`))
  await scenario.db.updateTable('campaign').set({ queue_order: order }).execute()
}

const permit = (grader: number) => scenario.permit(scenario.graders[grader], 'grade')
const give = async (grader: number, n: number) =>
  recordGrade(scenario.db, await permit(grader), ids[n], GradeInput.parse({ grade: 'C' }))

/** Places of what a grader would get, given back at once. */
async function offered(grader: number, count = 60): Promise<number[]> {
  const { candidates } = await lendNext(scenario.db, await permit(grader), count)
  await giveBack(scenario.db, await permit(grader))
  return candidates.map(({ id }) => ids.indexOf(id))
}

describe('score first', () => {
  beforeEach(async () => {
    await campaignOf(5, 'score')
    for (const [n, score] of [0.2, null, 0.9, 0.4, null].entries()) {
      await scenario.db.updateTable('candidate').set({ score }).where('id', '=', ids[n]).execute()
    }
  })

  it('goes by the machine’s score whatever others have graded, those without one last', async () => {
    await give(1, 0)
    await give(2, 0)
    await give(1, 4)
    expect(await offered(0)).toEqual([2, 3, 0, 1, 4])
  })

  it('takes in a candidate of a high score that comes late', async () => {
    await offered(0)
    ids.push(await addImagedCandidate(scenario.db, scenario.campaign, 'SWS-late'))
    await scenario.db.updateTable('candidate').set({ score: 0.99 }).where('name', '=', 'SWS-late').execute()
    expect(await offered(0, 2)).toEqual([5, 2])
  })

  it('serves no score to the browser', async () => {
    const text = JSON.stringify(await lendNext(scenario.db, await permit(0), 5))
    expect(text).not.toMatch(/score|heldByOthers|evidence/i)
  })
})

describe('shuffled', () => {
  beforeEach(() => campaignOf(30, 'shuffled'))

  it('gives everybody every candidate, in an order of their own that stays', async () => {
    const [first, second] = [await offered(0), await offered(1)]
    expect(first.toSorted((a, b) => a - b)).toEqual(ids.map((_, n) => n))
    expect(second).not.toEqual(first)
    expect(await offered(0)).toEqual(first)
    for (const n of first.slice(0, 4)) await give(0, n)
    expect(await offered(0)).toEqual(first.slice(4))
  })

  it('never goes beyond the wanted number', async () => {
    for (const grader of [1, 2, 3]) await give(grader, 7)
    expect(await offered(0)).not.toContain(7)
  })
})

describe('most needed first', () => {
  beforeEach(() => campaignOf(6, 'most needed'))

  it('comes back to what opened behind the place where a grader’s walk had come to', async () => {
    for (const n of [0, 1, 2]) await give(0, n)
    expect(await offered(0)).toEqual([3, 4, 5])
    // Two of another grader's fall into the bucket that was gone through.
    await give(1, 3)
    await give(1, 4)
    expect(await offered(0)).toEqual([3, 4, 5])
    for (const n of [3, 4, 5]) await give(0, n)
    expect(await offered(0)).toEqual([])
  })
})

describe('the order of a person', () => {
  it('visits each block once', () => {
    fc.assert(
      fc.property(fc.integer(), fc.integer({ min: 1, max: 200_000 }), (seed, candidates) => {
        const blocks = blocksFor(candidates)
        const visited = new Set(Array.from({ length: blocks }, (_, place) => blockAt(place, blocks, seed)))
        expect(visited.size).toBe(blocks)
        expect(spreadRange(blocks - 1, blocks).to).toBe(2 ** 32)
      }),
    )
  })

  it('keeps blocks at some hundred candidates', () => {
    expect([blocksFor(0), blocksFor(256), blocksFor(257), blocksFor(1_000_000)]).toEqual([1, 1, 2, 4096])
  })

  it('orders a block alike for a person and otherwise for another', () => {
    const block = Array.from({ length: 50 }, (_, n) => ({ id: n + 1 }))
    expect(shuffledBy(block, 7)).toEqual(shuffledBy(block.toReversed(), 7))
    expect(shuffledBy(block, 7)).not.toEqual(shuffledBy(block, 8))
  })
})
