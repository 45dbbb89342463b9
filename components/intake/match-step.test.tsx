import { render, screen, within } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest'
import type { LookedUp } from '@/lib/work/intake/look-up-files'
import { MatchStep } from './match-step'

// jsdom lays nothing out, and the table draws what fits into its height.
const height = Object.getOwnPropertyDescriptor(Element.prototype, 'clientHeight')
beforeAll(() => void Object.defineProperty(Element.prototype, 'clientHeight', { configurable: true, value: 480 }))
afterAll(() => void (height && Object.defineProperty(Element.prototype, 'clientHeight', height)))

/** The first block of a FITS file. */
const HEADER = 'SIMPLE  =                    T'.padEnd(2880)

const file = (name: string, content = HEADER) => ({ name, file: new File([content], name) })
const nothingHere = async (names: string[]): Promise<LookedUp> => ({
  files: names.map(() => null),
  told: names.map(() => null),
})

function show(files: ReturnType<typeof file>[], ask = nothingHere) {
  const props = { savePattern: vi.fn(async () => null as string | null), onTake: vi.fn(), onDrop: vi.fn() }
  render(
    <MatchStep files={files} rules={{ pattern: '{candidate}_{band}', bands: ['g', 'r', 'i'] }} ask={ask} {...props} />,
  )
  return props
}

const row = (name: RegExp) => screen.findByRole('row', { name })

describe('the matching table before anything is sent', () => {
  it('shows where each file goes and what is wrong, and sends nothing by itself', async () => {
    const { onTake } = show([
      file('SWS1_g.fits'),
      file('SWS1_r.fits'),
      file('b/SWS1_r.fits'),
      file('x.fits'),
      file('SWS2_i.fits', ''),
    ])
    expect(await screen.findByText('5 files for 2 candidates, 2 problems')).toBeInTheDocument()
    expect(within(await row(/^SWS1_g.fits/)).getByRole('cell', { name: 'g' })).toBeInTheDocument()
    expect(await row(/b\/SWS1_r.fits.*comes from 'SWS1_r.fits' already/)).toBeInTheDocument()
    expect(await row(/x.fits.*its header must tell the candidate/)).toBeInTheDocument()
    expect(await row(/SWS2_i.fits.*It is empty/)).toBeInTheDocument()
    expect(onTake).not.toHaveBeenCalled()
    await userEvent.click(screen.getByRole('button', { name: 'Show the 2 problems only' }))
    expect(screen.queryByRole('row', { name: /^SWS1_g.fits/ })).toBeNull()
  })

  it('tells files that are cut off or no FITS by their first bytes', async () => {
    show([file('SWS1_g.fits'), file('SWS1_r.fits', 'hello'), file('SWS1_i.fits', HEADER.slice(0, 100))])
    expect(await row(/SWS1_r.fits.*This is not a FITS file: it begins with "hello"/)).toBeInTheDocument()
    expect(await row(/SWS1_i.fits.*It has 100 bytes, and a FITS header alone has 2880/)).toBeInTheDocument()
    expect(screen.getByText('3 files for 1 candidate, 2 problems')).toBeInTheDocument()
  })

  it('has the focus when it opens, since the button that opened it is gone', async () => {
    show([file('SWS1_g.fits')])
    expect(await screen.findByText('1 file for 1 candidate, no problem seen')).toHaveFocus()
  })

  it('shows the effect of another pattern at once, and saves it before the files are taken in', async () => {
    const { savePattern, onTake } = show([file('g-SWS1.fits'), file('r-SWS1.fits')])
    expect(await screen.findByText('2 files for 0 candidates, no problem seen')).toBeInTheDocument()
    const pattern = screen.getByLabelText(/Name pattern/)
    await userEvent.clear(pattern)
    await userEvent.type(pattern, '{{band}-{{candidate}')
    expect(await screen.findByText('2 files for 1 candidate, no problem seen')).toBeInTheDocument()
    await userEvent.click(screen.getByRole('button', { name: 'Take them in' }))
    expect(savePattern).toHaveBeenCalledWith('{band}-{candidate}')
    expect(onTake).toHaveBeenCalledOnce()
  })

  it('takes nothing in by a pattern without a candidate, or one that the server refused', async () => {
    const { savePattern, onTake } = show([file('SWS1_g.fits')])
    const pattern = screen.getByLabelText(/Name pattern/)
    await userEvent.clear(pattern)
    await userEvent.type(pattern, '{{band}')
    expect(screen.getByText('The name pattern must contain {candidate}.')).toBeInTheDocument()
    expect(screen.getByRole('button', { name: 'Take them in' })).toBeDisabled()
    savePattern.mockResolvedValueOnce('Only leads may.')
    await userEvent.type(pattern, '{{candidate}')
    await userEvent.click(screen.getByRole('button', { name: 'Take them in' }))
    expect(await screen.findByRole('alert')).toHaveTextContent('Only leads may.')
    expect(onTake).not.toHaveBeenCalled()
  })

  it('reads a manifest by its columns, and by others when they are chosen', async () => {
    const manifest = file('list.csv', 'file,name,myid,ra,dec\nx.fits,wrong,SWS9,150.5,2.5\n')
    const { onTake } = show([manifest, file('x.fits')])
    expect(await row(/x.fits ?wrong/)).toHaveTextContent('150.50000 +2.50000')
    await userEvent.selectOptions(screen.getByLabelText('Candidate'), 'myid')
    expect(await row(/x.fits ?SWS9/)).toBeInTheDocument()
    await userEvent.click(screen.getByRole('button', { name: 'Take them in' }))
    expect(onTake.mock.calls[0][0][0]).toMatchObject({ name: 'list.csv', columns: '{"candidate":"myid"}' })
  })

  it('says which files become calibration stamps, also by a column that is chosen for the truth', async () => {
    const manifest = file('list.csv', 'name,truth,known\nSWS1,lens,0\nSWS2,,1\n')
    show([manifest, file('SWS1_g.fits'), file('SWS2_g.fits')])
    const said = '3 files for 2 candidates, 1 calibration stamp among them, no problem seen'
    expect(await screen.findByText(said)).toBeInTheDocument()
    expect(await row(/SWS1_g.fits/)).toHaveTextContent('stamp: lens')
    expect(await row(/SWS2_g.fits/)).not.toHaveTextContent('stamp')
    await userEvent.selectOptions(screen.getByLabelText('Truth (calibration)'), 'known')
    expect(await row(/SWS1_g.fits.*stamp: not a lens/)).toBeInTheDocument()
    expect(await row(/SWS2_g.fits.*stamp: lens/)).toBeInTheDocument()
  })

  it('passes on what the server has under the same name and size, and says what takes the place of another', async () => {
    const sha256 = 'a'.repeat(64)
    const { onTake } = show([file('SWS1_g.fits'), file('SWS1_r.fits', `${HEADER}longer`)], async () => ({
      files: [
        { sha256, bytes: 2880, fate: 'imaged' },
        { sha256, bytes: 2880, fate: 'imaged' },
      ],
      told: [null, null],
    }))
    expect(await row(/SWS1_r.fits.*Takes the place/)).toBeInTheDocument()
    await userEvent.click(screen.getByRole('button', { name: 'Take them in' }))
    expect(onTake.mock.calls[0][0].map(({ known }: { known?: string }) => known)).toEqual([sha256, undefined])
  })

  it('draws a few rows of a hundred thousand', async () => {
    const lines = Array.from({ length: 100_000 }, (_, index) => `SWS${index},0.5`)
    show([file('list.csv', `candidate,score\n${lines.join('\n')}\n`)])
    const table = await screen.findByRole('table', {}, { timeout: 60_000 })
    expect(table).toHaveAttribute('aria-rowcount', '100002')
    expect(within(table).getAllByRole('row').length).toBeLessThan(60)
  }, 90_000)
})
