import { gzipSync } from 'node:zlib'
import { cleanup, configure, fireEvent, render, screen, waitFor, within } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { afterEach, beforeEach, expect, it, vi } from 'vitest'
import { UNKNOWN_TRUTH } from '@/lib/science/agreement/dawid-skene-options'
import { LENS, NOT_A_LENS } from '@/lib/science/agreement/lens-model'
import type { FormState } from '@/components/ui/form-state'
import { RuleInput } from '@/lib/work/campaigns/rule-input'
import { encodeWhatIf } from '@/lib/work/consensus/what-if-columns'
import { WhatIfScreen } from './what-if-screen'

// A machine may be busy with other tests.
configure({ asyncUtilTimeout: 20_000 })
vi.setConfig({ testTimeout: 60_000 })

const RULE = RuleInput.parse({ method: 'mean', gradesWanted: 4, leastGrades: 2 })

/** Three candidates: confirmed at a mean of 2.5, open at 1.5, set aside at 0. */
function body(graded = true, stamps: ('lens' | 'not a lens')[] = [], looks = 0) {
  const candidates = 3
  const rows = candidates + stamps.length
  const truths = stamps.map((truth) => (truth === 'lens' ? LENS : NOT_A_LENS))
  const many = (values: number[]) => Uint16Array.from({ length: rows }, (_, row) => (graded ? (values[row] ?? 0) : 0))
  return gzipSync(
    encodeWhatIf({
      about: {
        rule: { ...RULE, version: 3 },
        lensShare: graded ? 0.3 : null,
        reliabilities: graded ? { from: 'fit' } : null,
        gradesSinceRun: null,
        graders: 2,
        leftOut: 0,
      },
      candidates,
      ids: Int32Array.of(7, 8, 9, ...stamps.map((_, at) => 10 + at)),
      state: Uint8Array.of(2, 0, 3, ...stamps.map(() => 0)),
      ruled: new Uint8Array(rows),
      truth: Int8Array.of(...Array<number>(candidates).fill(UNKNOWN_TRUTH), ...truths),
      notSentOn: new Uint8Array(rows),
      tallies: {
        looks: many([2, 2, 2]),
        grades: many([2, 2, 2]),
        points: Float64Array.from(many([5, 3, 0])),
        squaredPoints: Float64Array.from(many([13, 5, 0])),
        evidence: Float64Array.of(5, 0.5, -6, ...stamps.map(() => 0)),
      },
      // Every look an A for a lens, an N for the others.
      stampLooks: {
        start: Int32Array.from({ length: stamps.length + 1 }, (_, at) => at * looks),
        grade: Uint8Array.from(truths.flatMap((truth) => Array<number>(looks).fill(truth === LENS ? 0 : 3))),
        weight: new Float64Array(stamps.length * looks),
      },
    }),
  )
}

const action = vi.fn<(state: FormState, form: FormData) => Promise<FormState>>()
let answer: () => Response

beforeEach(() => {
  window.history.replaceState(null, '', '/campaigns/north/what-if')
  answer = () => new Response(new Uint8Array(body()))
  action.mockReset().mockResolvedValue({ done: 'Version 4 is in force.' })
  vi.stubGlobal('fetch', async (url: string) =>
    url.includes('/candidates?')
      ? Response.json({ candidates: [{ id: 8, name: 'SWS0008', thumbnail: null }] })
      : answer(),
  )
})
afterEach(() => {
  cleanup()
  vi.unstubAllGlobals()
})

const show = (query: Record<string, string> = {}) => render(<WhatIfScreen slug="north" query={query} action={action} />)
const heading = (name: string | RegExp) => screen.findByRole('heading', { level: 1, name })
const slider = (name: string) => screen.getByRole('slider', { name })

it('starts at the rule in force, under which nothing changes and nothing can be made', async () => {
  show()
  await heading('Nothing would change')
  expect(slider('Confirm from a mean of').getAttribute('aria-valuetext')).toBe('2 points')
  expect((screen.getByRole('button', { name: 'Make this the rule' }) as HTMLButtonElement).disabled).toBe(true)
})

it('says at once who would change when a threshold moves, and keeps it in the address', async () => {
  show()
  await heading('Nothing would change')
  // Stops of 0.05 points from 0: the thirtieth is 1.5.
  fireEvent.change(slider('Confirm from a mean of'), { target: { value: '30' } })
  await heading('1 candidate would change')
  expect(screen.getByRole('button', { pressed: true, name: /1.*open.*to.*confirmed/ })).toBeTruthy()
  expect((await screen.findByRole('link', { name: /SWS0008/ })).getAttribute('href')).toBe(
    '/campaigns/north/candidates/8',
  )
  await waitFor(() => expect(window.location.search).toBe('?confirmMean=1.5'))
})

it('takes an exact value that is typed, and thresholds that the address tells', async () => {
  show({ confirmMean: '2.6' })
  await heading('1 candidate would change')
  const field = screen.getByRole('textbox', { name: 'Confirm from a mean of, points' })
  fireEvent.change(field, { target: { value: '2,5' } })
  await heading('Nothing would change')
})

it('shows what the other method would make of the same grades', async () => {
  show()
  await heading('Nothing would change')
  await userEvent.click(screen.getByRole('radio', { name: /Reliability/ }))
  // Evidence 5 is below ln(0.95 / 0.001) = 6.86: the confirmed one would be open again.
  await heading('1 candidate would change')
  expect(screen.getByText(/fitted for this page/)).toBeTruthy()
  await waitFor(() => expect(window.location.search).toBe('?method=reliability'))
})

it('keeps the numbers of the last usable rule while thresholds do not fit together', async () => {
  show()
  await heading('Nothing would change')
  fireEvent.change(slider('Set aside up to a mean of'), { target: { value: '50' } })
  expect((await screen.findByRole('alert')).textContent).toMatch(/must be below/)
  expect((screen.getByRole('button', { name: 'Make this the rule' }) as HTMLButtonElement).disabled).toBe(true)
  await userEvent.click(screen.getByRole('button', { name: 'Back to the rule in force' }))
  expect(screen.queryByRole('alert')).toBeNull()
})

it.each([
  ['Non-lenses that may be confirmed, share', '-3', 'between 0 and 1'],
  ['Non-lenses that may be confirmed, share', '0', 'between 0 and 1'],
  ['Lenses that may be set aside, share', '1', 'between 0 and 1'],
  ['Lenses that may be set aside, share', '0.9995', 'less than 1'],
  ['Most looks, looks', '1000', 'No more than 50'],
  ['Least grades, grades', 'abc', 'is not a number'],
])('says what is wrong with a typed value and stays: %s %s', async (name, typed, says) => {
  show({ method: 'reliability' })
  const field = await screen.findByRole('textbox', { name })
  await userEvent.clear(field)
  await userEvent.type(field, typed)
  await userEvent.tab()
  expect((await screen.findByRole('alert')).textContent).toContain(says)
  expect(screen.getByRole('heading', { level: 1 })).toBeTruthy()
})

it('makes the tried rule the rule only after a question that says how many change', async () => {
  show({ confirmMean: '1.5' })
  await heading('1 candidate would change')
  await userEvent.click(screen.getByRole('button', { name: 'Make this the rule' }))
  const dialog = await screen.findByRole('alertdialog', { name: 'Make this the rule? 1 candidate changes' })
  expect(dialog.textContent).toContain('1: open → confirmed')
  expect(action).not.toHaveBeenCalled()
  await userEvent.click(within(dialog).getByRole('button', { name: 'Save as version 4' }))
  expect(await screen.findByText('Version 4 is in force.')).toBeTruthy()
  expect(Object.fromEntries(action.mock.calls[0][1])).toEqual({
    triedAgainst: '3',
    method: 'mean',
    gradesWanted: '4',
    leastGrades: '2',
    confirmMean: '1.5',
    setAsideMean: '1',
    splitSpread: '1',
  })
})

it('says why the rule was not made, and keeps the thresholds', async () => {
  action.mockResolvedValue({ message: 'Version 4 of the rule came into force since this page was opened.' })
  show({ confirmMean: '1.5' })
  await heading('1 candidate would change')
  await userEvent.click(screen.getByRole('button', { name: 'Make this the rule' }))
  await userEvent.click(await screen.findByRole('button', { name: 'Save as version 4' }))
  expect((await screen.findByRole('alert')).textContent).toContain('came into force')
})

it('measures on calibration stamps that have the looks of the rule, and says of the others that they want more', async () => {
  answer = () => new Response(new Uint8Array(body(true, ['lens', 'not a lens'], 4)))
  show()
  await heading('Nothing would change')
  expect(screen.getByText(/1 of 1 lenses, 0 of 1 that are none/)).toBeTruthy()
  expect(screen.queryByText(/more looks/)).toBeNull()
  cleanup()
  answer = () => new Response(new Uint8Array(body(true, ['lens', 'not a lens'], 3)))
  show()
  expect(await screen.findByText(/^2 calibration stamps want more looks before this rule would stop/)).toBeTruthy()
})

it('says that there is nothing measured without calibration stamps, and what to do', async () => {
  show()
  await heading('Nothing would change')
  expect(screen.getByText(/no calibration stamps/)).toBeTruthy()
})

it('says what to do while no candidate is graded', async () => {
  answer = () => new Response(new Uint8Array(body(false)))
  show()
  await heading('Nothing to try a rule on yet')
  expect(screen.getByRole('link', { name: 'Go to the bench' }).getAttribute('href')).toBe('/campaigns/north/bench')
})

it('says what went wrong and reads the numbers again when asked', async () => {
  const whole = answer
  answer = () => Response.json({ detail: 'Only a lead of this campaign may do this.' }, { status: 403 })
  show()
  expect((await screen.findByRole('alert')).textContent).toContain('Only a lead')
  answer = whole
  await userEvent.click(screen.getByRole('button', { name: 'Try again' }))
  await heading('Nothing would change')
})
