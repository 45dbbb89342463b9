import { render, screen } from '@testing-library/react'
import { expect, it } from 'vitest'
import { middleOf, RegionPlot } from './region-plot'

const cone = (raDeg: number, decDeg: number, radiusArcsec: number) => ({ raDeg, decDeg, radiusArcsec, halfWidthDeg: 1 })
const dots = (container: HTMLElement) =>
  [...container.querySelectorAll('circle[r="1.6"]')].map((dot) => ({
    x: Number(dot.getAttribute('cx')) - 74,
    y: Number(dot.getAttribute('cy')) - 74,
  }))

it('draws north up and east to the left, distances true, also across RA 0', () => {
  const positions = [
    { raDeg: 359.99, decDeg: 0 },
    { raDeg: 0.01, decDeg: 0 },
    { raDeg: 0, decDeg: 0.01 },
  ]
  const { container } = render(<RegionPlot positions={positions} cone={cone(0, 0, 72)} ra="" dec="" />)
  const [west, east, north] = dots(container)
  expect(west.x).toBeGreaterThan(1)
  expect(east.x).toBeCloseTo(-west.x, 6)
  expect(east.y).toBeCloseTo(0, 6)
  expect(north.y).toBeCloseTo(-west.x, 6)
  expect(screen.getByRole('img')).toHaveAccessibleName(/3 rows of this page, within 72 arcsec of 00ʰ00ᵐ00.0ˢ/)
})

it('finds the middle of places round a pole and round RA 0, and none of opposite ones', () => {
  const pole = middleOf([0, 90, 180, 270].map((raDeg) => ({ raDeg, decDeg: 89 })))
  expect(pole?.decDeg).toBeCloseTo(90, 9)
  const origin = middleOf([
    { raDeg: 359, decDeg: 1 },
    { raDeg: 1, decDeg: -1 },
  ])
  expect((origin!.raDeg + 1) % 360).toBeCloseTo(1, 9)
  expect(middleOf([])).toBeNull()
  expect(
    middleOf([
      { raDeg: 0, decDeg: 0 },
      { raDeg: 180, decDeg: 0 },
    ]),
  ).toBeNull()
})

it('outlines the box of the two ranges, and draws nothing where there are neither rows nor a cone', () => {
  const positions = [{ raDeg: 150, decDeg: 2 }]
  const { container, rerender } = render(<RegionPlot positions={positions} cone={null} ra="149..151" dec="1..3" />)
  expect(container.querySelectorAll('path[stroke="var(--lamp)"]')).toHaveLength(4)
  rerender(<RegionPlot positions={[]} cone={null} ra="149..151" dec="" />)
  expect(container).toBeEmptyDOMElement()
})
