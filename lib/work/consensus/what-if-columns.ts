/**
 * All candidates of a campaign as flat columns, so that a rule can be tried on them in the browser, and how they travel: the
 * length of a JSON head, the head, and the columns one after the other, little-endian as every browser's typed arrays.
 */
import type { CandidateTallies } from '@/lib/science/agreement/outcomes-at-once'
import { logOddsOf, probabilityOf } from '@/lib/science/agreement/posterior'
import type { LookSeries } from '@/lib/science/agreement/replay-looks'
import type { RuleInput } from '@/lib/work/campaigns/rule-input'

export interface WhatIfAbout {
  /** the rule in force */
  rule: RuleInput & { version: number }
  /** share of lenses among the candidates; null where no grade tells anything of it */
  lensShare: number | null
  /** where the reliabilities are from: the newest run, or a fit for this page where that run has none */
  reliabilities: { from: 'run'; runId: number; at: string } | { from: 'fit' } | null
  /** grades that came after the newest run read its input; null without a run */
  gradesSinceRun: number | null
  graders: number
  leftOut: number
}

/** One entry a row in every array: candidates of the search first, calibration stamps after them, each by id. */
export interface WhatIfColumns {
  about: WhatIfAbout
  candidates: number
  ids: Int32Array
  /** state now, as a code of OUTCOMES */
  state: Uint8Array
  /** 1 where a ruling stands, which no rule changes */
  ruled: Uint8Array
  /** LENS, NOT_A_LENS or UNKNOWN_TRUTH */
  truth: Int8Array
  /** 1 where the first pass did not send it on: set aside by every rule as long as no look counts */
  notSentOn: Uint8Array
  tallies: CandidateTallies
  /** looks of the calibration stamps, the one in row `candidates` first: each weighs as if the stamp had taught nothing of its grader */
  stampLooks: LookSeries
  /** of a lens; the share of lenses for a row without grades, NaN where that is not known */
  probabilities: Float64Array
}

/** Whether the first pass decides the row, whatever the rule. */
export const isDropped = ({ notSentOn, tallies }: Pick<WhatIfColumns, 'notSentOn' | 'tallies'>, row: number): boolean =>
  notSentOn[row] === 1 && tallies.looks[row] === 0

export type WhatIfRows = Omit<WhatIfColumns, 'probabilities'>

export function withProbabilities(rows: WhatIfRows): WhatIfColumns {
  const { lensShare } = rows.about
  const prior = lensShare === null ? NaN : logOddsOf(lensShare)
  return { ...rows, probabilities: rows.tallies.evidence.map((evidence) => probabilityOf(prior + evidence)) }
}

interface Head {
  about: WhatIfAbout
  candidates: number
  rows: number
  /** of calibration stamps, together */
  looks: number
}

/** Columns in the order in which they travel: those of 8 bytes first, so that each begins at a multiple of its own width. */
function columnsOf({ ids, state, ruled, truth, notSentOn, tallies, stampLooks }: WhatIfRows) {
  const { evidence, looks, grades, points, squaredPoints } = tallies
  return [
    ...[evidence, stampLooks.weight],
    ...[ids, stampLooks.start],
    ...[looks, grades, Uint16Array.from(points), Uint16Array.from(squaredPoints)],
    ...[state, ruled, truth, notSentOn, stampLooks.grade],
  ]
}

const HEAD_ALIGNMENT = 8
const BYTES_A_ROW = 8 + 4 + 4 * 2 + 4
const BYTES_A_LOOK = 8 + 1
const BYTES_A_STAMP = 4

const lengthOf = ({ candidates, rows, looks }: Head): number =>
  rows * BYTES_A_ROW + looks * BYTES_A_LOOK + (rows - candidates + 1) * BYTES_A_STAMP

export function encodeWhatIf(rows: WhatIfRows): Uint8Array<ArrayBuffer> {
  const { about, candidates, ids, stampLooks } = rows
  const head: Head = { about, candidates, rows: ids.length, looks: stampLooks.grade.length }
  const text = new TextEncoder().encode(JSON.stringify(head))
  const from = HEAD_ALIGNMENT * Math.ceil((4 + text.length) / HEAD_ALIGNMENT)
  const bytes = new Uint8Array(from + lengthOf(head))
  new DataView(bytes.buffer).setUint32(0, text.length, true)
  bytes.set(text, 4)
  let at = from
  for (const column of columnsOf(rows)) {
    bytes.set(new Uint8Array(column.buffer, column.byteOffset, column.byteLength), at)
    at += column.byteLength
  }
  return bytes
}

/** @throws RangeError when the bytes are not whole. */
export function decodeWhatIf(bytes: Uint8Array<ArrayBuffer>): WhatIfColumns {
  if (bytes.length < 4) throw new RangeError('The numbers did not arrive whole.')
  const length = new DataView(bytes.buffer, bytes.byteOffset).getUint32(0, true)
  const from = HEAD_ALIGNMENT * Math.ceil((4 + length) / HEAD_ALIGNMENT)
  if (bytes.length < from) throw new RangeError('The numbers did not arrive whole.')
  const head = JSON.parse(new TextDecoder().decode(bytes.subarray(4, 4 + length))) as Head
  if (bytes.length !== from + lengthOf(head)) throw new RangeError('The numbers did not arrive whole.')
  let at = from
  const next = (width: number, entries = head.rows): ArrayBuffer => {
    const start = at
    at += width * entries
    return bytes.buffer.slice(bytes.byteOffset + start, bytes.byteOffset + at)
  }
  const evidence = new Float64Array(next(8))
  const weight = new Float64Array(next(8, head.looks))
  const ids = new Int32Array(next(4))
  const start = new Int32Array(next(4, head.rows - head.candidates + 1))
  const [looks, grades, points, squaredPoints] = [2, 2, 2, 2].map((width) => new Uint16Array(next(width)))
  return withProbabilities({
    about: head.about,
    candidates: head.candidates,
    ids,
    state: new Uint8Array(next(1)),
    ruled: new Uint8Array(next(1)),
    truth: new Int8Array(next(1)),
    notSentOn: new Uint8Array(next(1)),
    tallies: {
      evidence,
      looks,
      grades,
      points: Float64Array.from(points),
      squaredPoints: Float64Array.from(squaredPoints),
    },
    stampLooks: { start, weight, grade: new Uint8Array(next(1, head.looks)) },
  })
}
