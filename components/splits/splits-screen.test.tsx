import { screen, within } from '@testing-library/react'
import { describe, expect, it, vi, beforeEach } from 'vitest'
import type { EvidenceRuling, Judgement } from '@/lib/work/rulings/candidate-evidence'
import { AT, evidence, NONE, show } from './_splits-fixture'

const push = vi.fn()
vi.mock('next/navigation', async (original) => ({
  ...(await original<Record<string, unknown>>()),
  useRouter: () => ({ push }),
}))

beforeEach(() => {
  push.mockClear()
  localStorage.clear()
})

const big = () => screen.getByRole('img', { name: / of SWS0002/ })
const reason = () => screen.getByRole('textbox', { name: /Reason/ })

describe('the splits page', () => {
  it('says how many there are, lists them with votes and mean, and shows the case with its grades and reasons', () => {
    show()
    expect(screen.getByRole('heading', { name: '3 splits' })).toBeVisible()
    const list = within(screen.getByRole('list', { name: 'Splits' }))
    expect(list.getAllByRole('link')).toHaveLength(3)
    expect(list.getByRole('link', { current: true })).toHaveTextContent('SWS0002')
    expect(list.getAllByRole('img', { name: 'Grades: 2 A, 1 N' })).toHaveLength(3)
    const grades = within(screen.getByRole('region', { name: 'Grades' }))
    expect(grades.getByText('curlew')).toBeVisible()
    expect(grades.getByText('“Tidal <b>tail</b>?”')).toBeVisible()
    expect(grades.getByText('22 s')).toBeVisible()
    expect(screen.getByText(/Grades A, A, N; the spread 1.41/)).toBeVisible()
    expect(screen.getByText(/Two more A grades would confirm it/)).toBeVisible()
    // 6.873523 deg / 15 = 00h27m29.65s; 1.149741 deg = 1 deg 8' 59.07".
    expect(screen.getByText('00ʰ27ᵐ29.65ˢ −01°08′59.1″')).toBeVisible()
  })

  it('moves through the list with J and K', async () => {
    const { user } = show()
    await user.keyboard('j')
    expect(push).toHaveBeenLastCalledWith('/campaigns/north/splits?case=3', { scroll: false })
    await user.keyboard('k')
    expect(push).toHaveBeenLastCalledWith('/campaigns/north/splits?case=1', { scroll: false })
  })

  it('does not move past the last case', async () => {
    const { user } = show({ evidence: evidence(3, 'SWS0003') })
    await user.keyboard('j')
    expect(push).not.toHaveBeenCalled()
  })

  it('shows a view by its number and by arrows, and nothing for a number without a view', async () => {
    const { user } = show()
    expect(big()).toHaveAccessibleName('Colour of SWS0002')
    await user.keyboard('2')
    expect(big()).toHaveAccessibleName('Deep of SWS0002')
    await user.keyboard('9')
    expect(big()).toHaveAccessibleName('Deep of SWS0002')
    await user.keyboard('{ArrowRight}{ArrowRight}')
    expect(big()).toHaveAccessibleName('Colour of SWS0002')
    await user.click(screen.getByRole('button', { name: 'Show g' }))
    expect(big()).toHaveAccessibleName('g of SWS0002')
  })

  it('rules by keyboard alone: a letter, the reason, Ctrl and Enter, and names the case that comes next', async () => {
    const { user, ruleAction } = show()
    await user.keyboard('b')
    expect(reason(), 'an R that follows must not be written into it').not.toHaveFocus()
    await user.keyboard('r')
    expect(reason()).toHaveFocus()
    expect(reason()).toHaveValue('')
    await user.keyboard('A counter-image, j k 2 n.')
    expect(push).not.toHaveBeenCalled()
    expect(big()).toHaveAccessibleName('Colour of SWS0002')
    await user.keyboard('{Control>}{Enter}{/Control}')
    expect(ruleAction).toHaveBeenCalledOnce()
    expect(Object.fromEntries(ruleAction.mock.calls[0][1])).toEqual({
      choice: 'confirmed-B',
      reason: 'A counter-image, j k 2 n.',
      lastRuling: '',
      next: '3',
    })
  })

  it('shows what the server refuses beside the field and keeps what was typed and chosen', async () => {
    const errors = { reason: 'Give a reason: it is kept with the ruling.' }
    const { user } = show({ ruleAction: async () => ({ message: 'Nothing was saved yet.', errors }) })
    await user.keyboard('nr')
    await user.keyboard('   ')
    await user.click(screen.getByRole('button', { name: 'Set aside' }))
    expect(await screen.findByText(errors.reason)).toBeVisible()
    expect(reason()).toBeInvalid()
    expect(reason()).toHaveAccessibleDescription(errors.reason)
    expect(reason()).toHaveValue('   ')
    expect(screen.getByRole('radio', { name: 'Set aside' })).toBeChecked()
  })

  it('starts every case afresh, also one that is come back to', async () => {
    const { user, showCase } = show()
    await user.keyboard('2b')
    showCase(3)
    expect(screen.getByRole('img', { name: 'Colour of SWS0003' })).toBeVisible()
    expect(screen.getByRole('radio', { name: 'Confirm as B' })).not.toBeChecked()
    showCase(2)
    expect(big()).toHaveAccessibleName('Colour of SWS0002')
    expect(screen.getByRole('radio', { name: 'Confirm as B' })).not.toBeChecked()
  })

  it('leaves the keys alone once they are switched off, and while a modifier is held', async () => {
    const { user } = show()
    await user.keyboard('{Control>}j{/Control}')
    expect(push).not.toHaveBeenCalled()
    await user.click(screen.getByRole('checkbox', { name: 'Single keys' }))
    await user.keyboard('j2b')
    expect(push).not.toHaveBeenCalled()
    expect(big()).toHaveAccessibleName('Colour of SWS0002')
    expect(screen.getByRole('radio', { name: 'Confirm as B' })).not.toBeChecked()
  })

  it('offers to hand back to the verdict only where a ruling stands, and says that a new one reverses it', async () => {
    const ruling: EvidenceRuling = { id: 5, by: 'avocet', outcome: 'confirmed', grade: 'B', reason: 'Real.', at: AT }
    const more: Partial<Judgement> = { state: 'confirmed', rulings: [ruling], standingRuling: ruling }
    const { user, ruleAction } = show({ evidence: evidence(2, 'SWS0002', more) })
    expect(screen.getByText(/Reverse this ruling/)).toBeVisible()
    await user.keyboard('vr')
    await user.keyboard('It was rash.{Control>}{Enter}{/Control}')
    expect(Object.fromEntries(ruleAction.mock.calls[0][1])).toMatchObject({ choice: 'by-verdict', lastRuling: '5' })
  })

  it('does not choose the verdict by its key where no ruling stands', async () => {
    const { user } = show()
    expect(screen.queryByRole('radio', { name: 'Let the verdict decide' })).toBeNull()
    await user.keyboard('v')
    expect(screen.getAllByRole('radio').filter((radio) => (radio as HTMLInputElement).checked)).toEqual([])
  })

  it('says what was ruled a moment ago and leads back to reverse it', () => {
    const ruled = {
      candidateId: 7,
      name: 'SWS0007',
      outcome: 'set aside' as const,
      grade: null,
      state: 'set aside' as const,
      by: 'avocet',
      at: AT,
    }
    show({ justRuled: ruled })
    expect(screen.getByText(/is set aside/)).toHaveTextContent('SWS0007 is set aside.')
    expect(screen.getByRole('link', { name: 'Reverse this ruling' })).toHaveAttribute(
      'href',
      '/campaigns/north/splits?case=7',
    )
  })

  it('says what to do next when nothing is split', () => {
    const none = { splits: NONE, evidence: null, open: 7 }
    show(none)
    expect(screen.getByRole('heading', { name: 'Nothing is split' })).toBeVisible()
    expect(screen.getByText(/7 candidates still wait for grades/)).toBeVisible()
  })

  it('calls the catalogue ready only when nothing is open now, whatever the newest run knew', () => {
    show({ splits: NONE, evidence: null, open: 0 })
    expect(screen.getByText(/Every candidate is decided/)).toBeVisible()
  })

  it('before the first run sends to it', () => {
    show({ splits: NONE, evidence: null, run: null })
    expect(screen.getByRole('heading', { name: 'No consensus has run yet' })).toBeVisible()
    expect(screen.getByRole('button', { name: 'Run consensus now' })).toBeEnabled()
  })

  it('runs the consensus and says when nothing was new; a number that is not defined has no figure', async () => {
    const { user } = show()
    const panel = within(screen.getByRole('region', { name: 'Consensus' }))
    expect(panel.getByText('0.62')).toBeVisible()
    expect(panel.getByText('not defined')).toBeVisible()
    await user.click(panel.getByRole('button', { name: 'Run consensus now' }))
    expect(await panel.findByText(/Nothing has changed since the newest run/)).toBeVisible()
  })

  it('does not offer to rule on a calibration stamp', () => {
    show({ evidence: evidence(2, 'SWS0002', { state: 'open', calibration: true }) })
    expect(screen.getByText(/calibration stamp/)).toBeVisible()
    expect(screen.queryByRole('form', { name: /Rule/ })).toBeNull()
  })
})
