/** For tests: a sheet of one grader's looks, without a database. */
import { gradeCode } from '@/lib/science/agreement/grade-table'
import type { Answer } from '@/lib/science/agreement/grades'
import type { GradeSheet } from './grade-sheet'

export interface SheetAnswer {
  grader?: number
  candidate?: number
  grade?: Answer
  /** milliseconds since 1970 */
  at?: number
  seconds?: number
  isLook?: boolean
}

export function sheetOf(answers: readonly SheetAnswer[], graders = 1, truth: readonly number[] = []): GradeSheet {
  const candidates = 1 + Math.max(0, ...answers.map(({ candidate }, index) => candidate ?? index))
  return {
    graders: Array.from({ length: graders }, (_, index) => ({
      personId: index + 1,
      name: `wader ${index}`,
      pseudonym: `G0${index}`,
      role: 'grader' as const,
      endedAt: null,
    })),
    candidates: Array.from({ length: candidates }, (_, index) => ({
      id: index + 1,
      truth: null,
      score: null,
      state: 'open' as const,
      imaged: 1 as const,
      settled: 0 as const,
      given: 0,
      asked: 0,
      ruled: 0 as const,
      pass: 'sent on' as const,
    })),
    truth: Int8Array.from({ length: candidates }, (_, index) => truth[index] ?? -1),
    answers: answers.length,
    candidateOf: Int32Array.from(answers, ({ candidate }, index) => candidate ?? index),
    graderOf: Uint16Array.from(answers, ({ grader }) => grader ?? 0),
    gradeOf: Uint8Array.from(answers, ({ grade }) => gradeCode(grade ?? 'N')),
    givenAt: Float64Array.from(answers, ({ at }) => at ?? 0),
    seconds: Float32Array.from(answers, ({ seconds }) => seconds ?? NaN),
    counts: Uint8Array.from(answers, () => 1),
    repeats: new Uint8Array(answers.length),
    isLook: Uint8Array.from(answers, ({ isLook }) => (isLook === false ? 0 : 1)),
    isFirst: Uint8Array.from(answers, ({ isLook }) => (isLook === false ? 0 : 1)),
  }
}
