import { fireEvent, render, screen, waitFor, within } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { defaultRecipe, type Recipe } from '@/lib/science/imaging/recipe'
import { wholeRecipe } from './recipe-draft'
import { RecipeEditor } from './recipe-editor'
import { RecipeHistory } from './recipe-history'

const refresh = vi.fn()
vi.mock('next/navigation', () => ({ useRouter: () => ({ refresh }) }))

const BANDS = ['g', 'r']
const own = defaultRecipe(BANDS)
const version = (number: number, recipe: Recipe) => ({
  version: number,
  hash: `${number}`.repeat(64),
  author: 'avocet',
  createdAt: '2026-12-01T12:00:00.000Z',
  recipe,
})
const VERSIONS = [version(2, { ...own, closeFieldArcsec: 10 }), version(1, own)]

interface Asked {
  path: string
  body: { recipe?: Recipe; after?: number; again?: number; candidates?: number[] } | null
}
let asked: Asked[]
let answers: Record<string, () => Response>
const to = (path: string) => asked.filter((one) => one.path === path)

const previewOf = (recipe: Recipe, ids: number[]) => ({
  samples: ids.map((id) => ({
    id,
    name: `SWS-${id}`,
    fault: null,
    views: recipe.views.map((key) => ({
      key,
      label: key,
      url: `data:image/png;base64,${key}`,
      width: 80,
      height: 80,
      note: id === 7 ? 'No data in 12 % of g, drawn as flat grey.' : null,
      geometry: { pixelScaleArcsec: 0.3, northAngleDeg: 0, eastLeft: true },
    })),
  })),
})

beforeEach(() => {
  refresh.mockReset()
  asked = []
  answers = {}
  vi.stubGlobal('fetch', async (address: string, init?: RequestInit) => {
    const path = address.split('/recipes')[1]
    const body = init?.body ? (JSON.parse(init.body as string) as Asked['body']) : null
    asked.push({ path, body })
    const answer = answers[path]?.()
    if (answer) return answer
    if (path === '/preview') return Response.json(previewOf(body?.recipe ?? own, body?.candidates ?? []))
    if (path.startsWith('/samples')) return Response.json({ candidates: [{ id: 9, name: 'SWS-9' }] })
    return Response.json({ version: 3, hash: 'f'.repeat(64) }, { status: 201 })
  })
})
afterEach(() => vi.unstubAllGlobals())

const show = (samples = [{ id: 7, name: 'SWS-7' }]) =>
  render(<RecipeEditor slug="north" bands={BANDS} versions={VERSIONS} firstSamples={samples} mostSamples={6} />)
const typeInto = (label: string, text: string) =>
  fireEvent.change(screen.getByLabelText(label), { target: { value: text } })
const save = () => screen.getByRole('button', { name: 'Save as a new version' })

describe('the editor of the recipe', () => {
  it('draws the samples by what is edited, once for a drag, and says what is to know of each picture', async () => {
    show()
    await screen.findByAltText('colour of SWS-7')
    expect(screen.getByText(/No data in 12 %/)).toBeTruthy()
    const before = to('/preview').length
    for (const softening of ['7', '8', '9']) typeInto('Softening', softening)
    await waitFor(() => expect(to('/preview').length).toBe(before + 1))
    expect(to('/preview').at(-1)?.body).toMatchObject({ recipe: { colour: { softeningSigma: 9 } }, candidates: [7] })
  })

  it('saves what was edited, from the version in force, and says so', async () => {
    show()
    expect(save()).toHaveProperty('disabled', true)
    await userEvent.click(screen.getByLabelText('Show Deep'))
    await userEvent.click(screen.getByLabelText('North up, east left'))
    await userEvent.click(save())
    const { body } = to('').at(-1)!
    expect(body?.after).toBe(2)
    expect(body?.recipe?.northUp).toBe(true)
    expect(body?.recipe?.views).not.toContain('deep')
    expect(await screen.findByText('Version 3 is in force. All pictures are made by it now.')).toBeTruthy()
    expect(refresh).toHaveBeenCalled()
  })

  it('keeps everything when the server refuses, and marks the field', async () => {
    answers[''] = () =>
      Response.json(
        {
          detail: 'What was sent cannot be used.',
          invalid_params: [{ name: 'closeFieldArcsec', reason: 'Too small.' }],
        },
        { status: 422 },
      )
    show()
    typeInto('Close field', '0.1')
    await userEvent.click(save())
    expect(await screen.findByText('What was sent cannot be used.')).toBeTruthy()
    expect(screen.getByText('Too small.')).toBeTruthy()
    expect(screen.getByLabelText('Close field')).toHaveProperty('value', '0.1')
    expect(refresh).not.toHaveBeenCalled()
  })

  it('does not take an emptied field for 0', async () => {
    show()
    typeInto('Softening', '')
    expect(save()).toHaveProperty('disabled', true)
    fireEvent.blur(screen.getByLabelText('Softening'))
    expect(screen.getByLabelText('Softening')).toHaveProperty('value', '6')
  })

  it('goes back to the version in force', async () => {
    show()
    typeInto('Close field', '20')
    await userEvent.click(screen.getByRole('button', { name: 'Back to version 2' }))
    expect(screen.getByLabelText('Close field')).toHaveProperty('value', '10')
    expect(save()).toHaveProperty('disabled', true)
  })

  it('takes an earlier version again by its number', async () => {
    show()
    await userEvent.click(screen.getByRole('button', { name: 'Take version 1 again' }))
    expect(to('').at(-1)?.body).toEqual({ after: 2, again: 1 })
  })

  it('shows every version with its hash and what it changed', () => {
    show()
    const [, newest, first] = within(screen.getByRole('region', { name: 'History of the recipe' })).getAllByRole('row')
    expect(newest.textContent).toContain('222222222222')
    expect(newest.textContent).toContain('close field')
    expect(first.textContent).toContain('the first')
  })

  it('says that a version which only draws otherwise was made by Ringside', () => {
    render(
      <RecipeHistory
        versions={[version(2, own), version(1, { ...own, version: 1 })]}
        bands={BANDS}
        busy={false}
        onLook={vi.fn()}
        onAgain={vi.fn()}
      />,
    )
    const [, newest, first] = screen.getAllByRole('row')
    expect(newest.textContent).toContain('saturated cores without false colour')
    expect(newest.textContent).toContain('Ringside')
    expect(first.textContent).toContain('avocet')
  })

  it('adds a candidate by name, and says when there is none', async () => {
    show()
    await userEvent.type(screen.getByLabelText('Add by name'), 'sws-9')
    await userEvent.click(screen.getByRole('button', { name: 'Add' }))
    expect(await screen.findByRole('button', { name: 'Leave out SWS-9' })).toBeTruthy()
    await waitFor(() => expect(to('/preview').at(-1)?.body?.candidates).toEqual([7, 9]))
    answers['/samples?count=6&name=nobody'] = () => Response.json({ candidates: [] })
    await userEvent.type(screen.getByLabelText('Add by name'), 'nobody')
    await userEvent.click(screen.getByRole('button', { name: 'Add' }))
    expect(await screen.findByText(/No candidate with cutouts has ‘nobody’/)).toBeTruthy()
  })

  it('can be used before there are cutouts, and says what is missing', async () => {
    show([])
    expect(screen.getByText('Nothing to try it on yet')).toBeTruthy()
    typeInto('Close field', '20')
    expect(save()).toHaveProperty('disabled', false)
    expect(to('/preview')).toEqual([])
  })
})

it('spells out a stored recipe in full before it is edited', () => {
  expect(Object.keys(wholeRecipe(own, BANDS)).sort()).toContain('residual')
})
