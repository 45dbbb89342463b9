import { render, screen } from '@testing-library/react'
import { expect, it } from 'vitest'
import { skyExtent } from '@/lib/science/sky/sky-extent'
import { releaseLinks } from './release-links'
import { SkySection } from './sky-section'

it('says of the classes on its map what they mean, and names no other', () => {
  const points = (['A', 'B'] as const).map((one, at) => ({
    key: one,
    rowNumber: at + 1,
    designation: `SWS ${one}`,
    raDeg: 10 + at / 10,
    decDeg: 20,
    class: one,
  }))
  render(
    <SkySection
      sky={{ kind: 'points', points, entries: 2, extent: skyExtent(points) }}
      links={releaseLinks('north', 1, null)}
    />,
  )
  expect(screen.getByText('A sure')).toBeInTheDocument()
  expect(screen.getByText('B probable')).toBeInTheDocument()
  expect(screen.queryByText('C possible')).toBeNull()
})
