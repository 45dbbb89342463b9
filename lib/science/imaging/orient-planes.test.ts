import { describe, expect, it } from 'vitest'
import { simulateCandidate } from '@/lib/science/lensing/simulate-candidate'
import type { BandPlane, PlaneOrientation } from './normalise-planes'
import { orientPlanes, shownOrientation } from './orient-planes'
import { defaultRecipe } from './recipe'
import { renderViews } from './render-views'

const lies = (northAngleDeg: number, eastLeft = true): PlaneOrientation => ({ northAngleDeg, eastLeft })

/** One bright pixel right of the middle of 5 by 5. */
const plane = (band: string, orientation: PlaneOrientation | null): BandPlane => {
  const data = new Float32Array(25)
  data[2 * 5 + 4] = 1
  return { band, width: 5, height: 5, data, orientation }
}
const brightest = ({ data }: BandPlane) => data.indexOf(Math.max(...data))

describe('turning the bands of a candidate', () => {
  it('leaves them as they are when nobody asks and they lie alike', () => {
    const planes = [plane('g', lies(90)), plane('r', lies(90.2)), plane('i', null)]
    expect(orientPlanes(planes, false)).toEqual({ planes, note: null })
    expect(shownOrientation([lies(90), lies(90.2), null], false)).toEqual(lies(90))
  })

  it('puts north above when asked: what lay at the right, to the north, lies above', () => {
    const { planes, note } = orientPlanes([plane('g', lies(-90))], true)
    expect(brightest(planes[0])).toBe(4 * 5 + 2)
    expect(note).toBeNull()
    expect(shownOrientation([lies(-90)], true)).toEqual(lies(0))
  })

  it('turns bands that lie differently without being asked, and says so', () => {
    const { planes, note } = orientPlanes([plane('g', lies(0)), plane('r', lies(180))], false)
    expect(planes.map(brightest)).toEqual([2 * 5 + 4, 2 * 5])
    expect(note).toBe('Turned north up: the bands lie differently on the sky.')
    expect(shownOrientation([lies(0), lies(180)], false)).toEqual(lies(0))
  })

  it('tells a mirrored band from one that is not', () => {
    const { planes, note } = orientPlanes([plane('g', lies(0)), plane('r', lies(0, false))], false)
    expect(planes.map(brightest)).toEqual([2 * 5 + 4, 2 * 5])
    expect(note).not.toBeNull()
  })

  it('turns a band of unknown direction with the first known one, and nothing when none is known', () => {
    const { planes } = orientPlanes([plane('g', null), plane('r', lies(180))], true)
    expect(planes.map(brightest)).toEqual([2 * 5, 2 * 5])
    const unknown = [plane('g', null)]
    expect(orientPlanes(unknown, true)).toEqual({ planes: unknown, note: null })
    expect(shownOrientation([null], true)).toBeNull()
  })

  it('takes 359.9 degrees for north up, and resamples nothing', () => {
    const planes = [plane('g', lies(359.9))]
    expect(orientPlanes(planes, true).planes[0]).toBe(planes[0])
  })
})

it('says on the views of several bands that they were turned, and turns the picture by the recipe', () => {
  const { bands, width, height } = simulateCandidate('lens-arc', 3)
  const lying = (angles: number[]) =>
    bands.map(({ band, data }, k) => ({ band, width, height, data, orientation: lies(angles[k]) }))
  const recipe = defaultRecipe(['g', 'r', 'i'])
  const noteOf = (angles: number[]) => renderViews(lying(angles), recipe).map((view) => view.note)
  expect(noteOf([0, 0, 0])).toEqual(Array(8).fill(null))
  expect(noteOf([0, 0, 90])[0]).toBe('Turned north up: the bands lie differently on the sky.')
  const [plain] = renderViews(lying([180, 180, 180]), recipe)
  const [turned] = renderViews(lying([180, 180, 180]), { ...recipe, northUp: true })
  const pixel = ({ pixels }: typeof plain, i: number) => [...pixels.subarray(3 * i, 3 * i + 3)]
  // Half a turn puts the last pixel first; noise is estimated in another order, so a level may differ by one.
  pixel(turned, 6399 - 1234).forEach((level, k) => expect(Math.abs(level - pixel(plain, 1234)[k])).toBeLessThan(3))
})
