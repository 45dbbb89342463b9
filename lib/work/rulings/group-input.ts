import { z } from 'zod'
import { parseRulingForm, type RulingInput } from './ruling-input'

/** More than a page of splits holds are not ruled at once. */
export const MOST_AT_ONCE = 200

export interface GroupCase {
  candidateId: number
  /** The newest ruling on it that the lead has seen. */
  lastRulingSeen: number | null
}

export interface GroupRuling extends Pick<RulingInput, 'outcome' | 'grade' | 'reason'> {
  cases: GroupCase[]
}

/** '12:7,13:' stands for candidate 12 as of ruling 7 and candidate 13 as of none. */
const Cases = z
  .string('Choose what to rule on.')
  .regex(/^\d{1,15}:\d{0,15}(,\d{1,15}:\d{0,15})*$/, 'Choose what to rule on.')
  .transform((text) => {
    const cases = text.split(',').map((one): GroupCase => {
      const [id, ruling] = one.split(':')
      return { candidateId: Number(id), lastRulingSeen: ruling === '' ? null : Number(ruling) }
    })
    return [...new Map(cases.map((one) => [one.candidateId, one])).values()]
  })
  .refine((cases) => cases.length <= MOST_AT_ONCE, `Rule on at most ${MOST_AT_ONCE} at once.`)

export function writeCases(cases: readonly GroupCase[]): string {
  return cases.map(({ candidateId, lastRulingSeen }) => `${candidateId}:${lastRulingSeen ?? ''}`).join(',')
}

/** @throws ZodError with the faults of `cases`, `choice` and `reason`. */
export function parseGroupForm(form: FormData): GroupRuling {
  const cases = z.object({ cases: Cases }).parse({ cases: form.get('cases') }).cases
  const single = new FormData()
  for (const name of ['choice', 'reason']) if (form.has(name)) single.set(name, String(form.get(name)))
  single.set('lastRuling', '')
  const { outcome, grade, reason } = parseRulingForm(single)
  return { cases, outcome, grade, reason }
}

/** Takes a group of rulings back: each candidate by verdict again, as long as its ruling of the group is the newest. */
export function parseUndoForm(form: FormData): GroupRuling {
  const cases = z.object({ cases: Cases }).parse({ cases: form.get('cases') }).cases
  const one = cases.length === 1 ? 'a ruling' : `a ruling on ${cases.length} candidates at once`
  return { cases, outcome: 'by verdict', grade: null, reason: `Taken back: ${one}.` }
}
