import { render } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { vi } from 'vitest'
import type { FormState } from '@/components/ui/form-state'
import type { NewestRun } from '@/lib/work/consensus/newest-run'
import type { CandidateEvidence, Judgement } from '@/lib/work/rulings/candidate-evidence'
import { SplitsScreen, type SplitsScreenProps } from './splits-screen'

/** For tests: the splits page with three splits, the second of which is shown. */

const geometry = { pixelScaleArcsec: 0.2, northAngleDeg: 0, eastLeft: true }
const view = (key: string, label: string) => ({
  key,
  label,
  url: `/stamps/${key}`,
  width: 80,
  height: 80,
  note: null,
  geometry,
})
export const NONE = { total: 0, order: 'worth' as const, method: 'mean' as const, cases: [], ruled: [] }
const votes = { A: 2, B: 0, C: 0, N: 1, U: 0 }
const RULE = {
  method: 'mean' as const,
  id: 1,
  version: 1,
  gradesWanted: 4,
  leastGrades: 3,
  confirmMean: 2,
  setAsideMean: 1,
  splitSpread: 0.9,
}
export const AT = '2026-12-01T12:00:00.000Z'

function judgement(more: Partial<Judgement> = {}): Judgement {
  return {
    state: 'split',
    stateSince: AT,
    stateReason: 'Split: grades A, A, N; the spread 1.41 is above 0.90.',
    calibration: false,
    score: null,
    lensRedshift: null,
    sourceRedshift: null,
    votes,
    grades: [
      {
        id: 1,
        by: 'curlew',
        own: false,
        grade: 'A',
        occasion: 'first',
        informed: false,
        leftOut: false,
        tags: ['arc'],
        remark: null,
        seconds: 7,
        givenAt: AT,
      },
      {
        id: 2,
        by: 'plover',
        own: false,
        grade: 'N',
        occasion: 'first',
        informed: false,
        leftOut: false,
        tags: [],
        remark: 'Tidal <b>tail</b>?',
        seconds: 22.4,
        givenAt: AT,
      },
    ],
    late: [],
    verdict: {
      id: 9,
      outcome: 'split',
      grades: 3,
      cannotJudge: 0,
      mean: 2,
      spread: Math.SQRT2,
      probability: null,
      reason: '',
      rule: RULE,
      at: AT,
    },
    why: null,
    rulings: [],
    standingRuling: null,
    history: [],
    designation: null,
    ...more,
  }
}

export function evidence(id: number, name: string, more: Partial<Judgement> = {}): CandidateEvidence {
  return {
    id,
    name,
    raDeg: 6.873523,
    decDeg: -1.149741,
    pixelScaleArcsec: 0.2,
    files: [],
    pictures: {
      views: [view('colour', 'Colour'), view('deep', 'Deep'), view('band:g', 'g')],
      geometry,
      recipe: 1,
      closeFieldArcsec: 12,
      planesUrl: null,
    },
    judgement: judgement(more),
  }
}

const RUN: NewestRun = {
  id: 3,
  ruleVersion: 1,
  createdAt: AT,
  summary: {
    candidates: 72,
    grades: 227,
    cannotJudge: 5,
    graders: 4,
    open: 7,
    split: 2,
    confirmed: 21,
    setAside: 32,
    changed: 72,
    alphaOrdinal: 0.62,
    alphaNote: 'Over 224 grades.',
    fleissKappa: null,
    kappaNote: 'No candidate has two grades.',
  },
}

export function show(more: Partial<SplitsScreenProps> = {}) {
  const ruleAction = vi.fn(async (_before: FormState, _form: FormData): Promise<FormState> => ({}))
  const cases = [1, 2, 3].map((id) => ({
    id,
    name: `SWS000${id}`,
    mean: 2 - id / 10,
    spread: 1.41,
    probability: null,
    worth: '0.30 from a threshold',
    lastRulingId: null,
    votes,
    picture: null,
  }))
  const props: SplitsScreenProps = {
    slug: 'north',
    personId: 1,
    splits: { total: 3, order: 'worth', method: 'mean', cases, ruled: [] },
    run: RUN,
    open: 0,
    evidence: evidence(2, 'SWS0002'),
    decides: ['Two more A grades would confirm it.'],
    talk: null,
    justRuled: null,
    missing: false,
    ruleAction,
    groupAction: async () => ({}),
    undoGroupAction: async () => ({}),
    runAction: async () => ({ done: 'Nothing has changed since the newest run, so nothing was written.' }),
    ...more,
  }
  const { rerender } = render(<SplitsScreen {...props} />)
  const showCase = (id: number) => rerender(<SplitsScreen {...props} evidence={evidence(id, `SWS000${id}`)} />)
  return { ruleAction, user: userEvent.setup(), showCase }
}
