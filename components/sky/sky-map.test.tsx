import { geoArea } from 'd3-geo'
import { render, screen, within } from '@testing-library/react'
import { describe, expect, it } from 'vitest'
import { skyExtent } from '@/lib/science/sky/sky-extent'
import { decText, raText, skyGrid } from './sky-grid'
import { SkyMap, type SkyMarks, type SkyPoint } from './sky-map'
import { cellPath, densityStep } from './sky-marks'
import { FRAME, skyProjection, type SkyProjection } from './sky-projection'

const at = (raDeg: number, decDeg: number) => ({ raDeg, decDeg })
const region = (places: { raDeg: number; decDeg: number }[]) => skyProjection(skyExtent(places), places)
const whole = skyProjection(null, [])

const PATCH = [at(358, -3), at(2, -3), at(358, 3), at(2, 3), at(0, 0)]

/** Of a small square on the sky as drawn, by the shoelace formula, in square units. */
function drawnArea({ projection }: SkyProjection, raDeg: number, decDeg: number, sideDeg: number): number {
  const half = sideDeg / 2
  const wide = half / Math.cos((decDeg * Math.PI) / 180)
  const corners = [
    [raDeg - wide, decDeg - half],
    [raDeg + wide, decDeg - half],
    [raDeg + wide, decDeg + half],
    [raDeg - wide, decDeg + half],
  ].map((corner) => projection(corner as [number, number])!)
  const twice = corners.reduce((sum, [x, y], k) => {
    const [nextX, nextY] = corners[(k + 1) % 4]
    return sum + x * nextY - nextX * y
  }, 0)
  return Math.abs(twice) / 2
}

describe('a map of the sky', () => {
  it.each([
    ['a region', region(PATCH)],
    ['the whole sky', whole],
  ])('of %s has north up and right ascension growing to the left', (_, { projection }) => {
    const [x, y] = projection([0, 0])!
    expect(projection([1, 0])![0]).toBeLessThan(x)
    expect(projection([0, 1])![1]).toBeLessThan(y)
  })

  it('of the whole sky gives equal areas equal room, from the middle to the poles', () => {
    const inTheMiddle = drawnArea(whole, 0, 0, 0.2)
    for (const [ra, dec] of [
      [100, 0],
      [170, 40],
      [30, -70],
      [200, 85],
    ]) {
      expect(drawnArea(whole, ra, dec, 0.2) / inTheMiddle).toBeCloseTo(1, 2)
    }
  })

  it('of a region does so too, also of a wide one', () => {
    const wide = region([at(20, -30), at(100, 30), at(60, 0)])
    const inTheMiddle = drawnArea(wide, 60, 0, 0.1)
    for (const [ra, dec] of [
      [20, -30],
      [100, 30],
      [90, -20],
    ]) {
      expect(drawnArea(wide, ra, dec, 0.1) / inTheMiddle).toBeCloseTo(1, 2)
    }
  })

  it('of the whole sky is twice as wide as high, as Hammer has it', () => {
    const right = whole.projection([-179.999, 0])![0]
    const left = whole.projection([179.999, 0])![0]
    const height = whole.projection([0, -90])![1] - whole.projection([0, 90])![1]
    expect((right - left) / height).toBeCloseTo(2, 3)
  })

  it('shows a survey of twenty square degrees as large as the frame lets it, over right ascension 0', () => {
    const { projection } = region(PATCH)
    const ys = PATCH.map(({ raDeg, decDeg }) => projection([raDeg, decDeg])![1])
    const filled = (Math.max(...ys) - Math.min(...ys)) / (FRAME.bottom - FRAME.top)
    expect(filled).toBeGreaterThan(0.85)
    expect(filled).toBeLessThan(1)
  })

  it('does not blow one entry up to fill it', () => {
    const { reachDeg } = region([at(150, 2)])
    expect(reachDeg).toBeCloseTo(0.05, 3)
  })

  it.each([
    ['a patch', region(PATCH)],
    ['one place', region([at(150.1, 2.2)])],
    ['a pole', region([at(0, 88), at(90, 88), at(180, 88), at(270, 88)])],
    ['the whole sky', whole],
  ])('of %s has labelled lines both ways and no number that is none', (_, sky) => {
    const { path, ra, dec } = skyGrid(sky)
    expect(path).not.toMatch(/NaN|Infinity/)
    expect(ra.length).toBeGreaterThanOrEqual(2)
    expect(dec.length).toBeGreaterThanOrEqual(1)
    for (const { x, y } of [...ra, ...dec]) expect(Number.isFinite(x + y)).toBe(true)
  })

  it('writes right ascension in hours and declination in degrees, as fine as its lines', () => {
    expect(raText(-15, 15)).toBe('23ʰ')
    expect(raText(359.99999, 0.5)).toBe('0ʰ00ᵐ')
    expect(raText(150.125, 0.125)).toBe('10ʰ00ᵐ30ˢ')
    expect(decText(-0.5, 0.5)).toBe('−0°30′')
    expect(decText(10, 5)).toBe('+10°')
  })

  it('draws a cell and not the rest of the sky around it', () => {
    const bounds = { westRaDeg: 359, eastRaDeg: 360, southDecDeg: 0, northDecDeg: 1 }
    expect(cellPath(region(PATCH).projection, bounds)).toMatch(/^M[\d.,LMZ-]+Z$/)
    const ring: [number, number][] = [
      [359, 1],
      [360, 1],
      [360, 0],
      [359, 0],
      [359, 1],
    ]
    expect(geoArea({ type: 'Polygon', coordinates: [ring] })).toBeLessThan(0.01)
  })

  it('steps density up with the count, the fullest cell at the top', () => {
    expect(densityStep(1, 1000, 6)).toBe(1)
    expect(densityStep(1000, 1000, 6)).toBe(6)
    expect(densityStep(1, 1, 6)).toBe(6)
  })
})

const point = (key: string, raDeg: number, decDeg: number): SkyPoint => {
  return { key, label: `SWS ${key}`, class: 'A', raDeg, decDeg, href: `/r/north/1/${key}` }
}
const show = (marks: SkyMarks) => render(<SkyMap id="map" title="Where the entries lie" marks={marks} />)

describe('the drawing', () => {
  it('leads to each entry where they are few, by Tab too', () => {
    const points = [point('a', 150, 2), point('b', 150.2, 2.1)]
    show({ kind: 'points', points, entries: 2, extent: skyExtent(points) })
    const map = screen.getByRole('group', { name: /Where the entries lie/ })
    expect(within(map).getByRole('link', { name: 'SWS b' })).toHaveAttribute('href', '/r/north/1/b')
    expect(map).toHaveTextContent(/2 entries, within .* of right ascension 150\.1/)
  })

  it('is words and a picture where they are many, so that nobody tabs through hundreds of dots', () => {
    const points = Array.from({ length: 100 }, (_, k) => point(String(k), 150 + k / 100, 2))
    const { container } = show({ kind: 'points', points, entries: 100, extent: skyExtent(points) })
    expect(screen.getByRole('group', { name: /Where the entries lie/ })).toHaveTextContent(/100 entries, within/)
    expect(screen.queryByRole('link')).toBeNull()
    expect(container.querySelectorAll('a:not([tabindex="-1"])')).toHaveLength(0)
    expect(container.querySelectorAll('a')).toHaveLength(100)
  })

  it('says how dense in words, for the whole sky and for none', () => {
    const cell = { westRaDeg: 0, eastRaDeg: 10, southDecDeg: 0, northDecDeg: 10, count: 3000 }
    show({ kind: 'cells', cells: [cell], cellAreaDeg2: 99.5, entries: 3000, extent: null })
    expect(
      screen.getByRole('img', { name: /3,000 entries, all round the sky\. Cells of 100 square degrees|Where/ }),
    ).toHaveTextContent(/3,000 entries, all round the sky/)
  })
})
