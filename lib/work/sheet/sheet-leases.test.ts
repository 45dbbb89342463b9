import { randomUUID } from 'node:crypto'
import { beforeEach, describe, expect, it } from 'vitest'
import { makeSheetScenario, type SheetScenario } from './_sheet-scenario'
import { giveSheetBack, lendSheet } from './lend-sheet'
import { recordMarks } from './record-marks'

let scenario: SheetScenario

beforeEach(async () => {
  scenario = await makeSheetScenario(6)
})

const grader = (n: number) => scenario.permit(scenario.graders[n], 'grade')
const lend = async (n: number, count: number) =>
  (await lendSheet(scenario.db, await grader(n), count)).stamps.map(({ id }) => id)
const held = async () =>
  (await scenario.db.selectFrom('sheet_lease').select('candidate_id').orderBy('candidate_id').execute()).map(
    (row) => row.candidate_id,
  )
const placesOf = (ids: readonly number[]) => ids.map((id) => scenario.ids.indexOf(id))

describe('what lies on a sheet', () => {
  it('is held no longer once it is marked, and again once the mark is taken back', async () => {
    const ids = await lend(0, 4)
    await scenario.mark(scenario.graders[0], placesOf([ids[0]]), 'sent on')
    await scenario.mark(scenario.graders[0], placesOf([ids[1], ids[2]]), 'dropped')
    expect(await held()).toEqual([ids[3]])
    await scenario.mark(scenario.graders[0], placesOf([ids[1]]), 'taken back')
    expect(await held()).toEqual([ids[1], ids[3]].sort((a, b) => a - b))
  })

  it('does not come back where it lies on another sheet by then', async () => {
    const ids = await lend(0, 1)
    await giveSheetBack(scenario.db, await grader(0))
    expect(await lend(1, 6)).toContain(ids[0])
    await scenario.mark(scenario.graders[0], placesOf(ids), 'taken back')
    const holders = await scenario.db
      .selectFrom('sheet_lease')
      .select('person_id')
      .where('candidate_id', '=', ids[0])
      .execute()
    expect(holders).toEqual([{ person_id: scenario.graders[1].id }])
  })

  it('is given back by name, of one’s own only', async () => {
    const ids = await lend(0, 3)
    await giveSheetBack(scenario.db, await grader(1), ids)
    expect(await held()).toHaveLength(3)
    await giveSheetBack(scenario.db, await grader(0), [ids[1]])
    expect(await held()).toEqual([ids[0], ids[2]].sort((a, b) => a - b))
  })
})

it('a mark that says another thing under a known id is refused, and the first stands', async () => {
  const [candidate] = await lend(0, 1)
  const id = randomUUID()
  const permit = await grader(0)
  await recordMarks(scenario.db, permit, [{ id, candidate, mark: 'sent on' }])
  const again = await recordMarks(scenario.db, permit, [{ id, candidate, mark: 'dropped' }])
  expect(again).toMatchObject({ saved: [], refused: [{ id }] })
  expect(await scenario.stateOf(placesOf([candidate])[0])).toBe('sent on')
})
