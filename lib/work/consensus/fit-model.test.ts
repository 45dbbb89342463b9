import { describe, expect, it } from 'vitest'
import { UNKNOWN_TRUTH } from '@/lib/science/agreement/dawid-skene-options'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'
import { fitModel } from './fit-model'
import type { RunGrades } from './read-grades'

const PEOPLE = [1, 2, 3]

/** Grades of three people, each candidate's as a list of codes, and then candidates without a grade. */
function gradesOf(candidates: readonly number[][], ungraded: number): RunGrades {
  const cells = [...candidates.map((grades) => grades.map((grade, grader) => grader * 4 + grade))]
  for (let more = 0; more < ungraded; more++) cells.push([])
  const start = [0]
  for (const cell of cells) start.push(start.at(-1)! + cell.length)
  const count = cells.length
  return {
    ids: Int32Array.from({ length: count }, (_, at) => at + 1),
    truth: new Int32Array(count).fill(UNKNOWN_TRUTH),
    cannotJudge: new Int32Array(count),
    newestAnswer: new Int32Array(count),
    people: [...PEOPLE],
    peopleAtCandidates: new Set(PEOPLE),
    table: {
      candidates: count,
      graders: PEOPLE.length,
      grades: 4,
      start: Int32Array.from(start),
      cell: Int32Array.from(cells.flat()),
    },
  }
}

describe('the model of a run', () => {
  it('is the same to the last digit however many candidates have no grade yet', async () => {
    for (let seed = 1; seed <= 40; seed++) {
      const random = new SeededRandom(seed)
      const candidates = Array.from({ length: random.integer(3, 23) }, () => {
        const reach = random.uniform() < 0.3 ? 2.5 : 4
        return PEOPLE.map(() => Math.min(3, Math.floor(random.uniform() * reach)))
      })
      const alone = await fitModel(gradesOf(candidates, 0), [])
      expect(await fitModel(gradesOf(candidates, 5), [])).toEqual(alone)
    }
  })
})
