import { expect, it } from 'vitest'
import { releaseLinks } from './release-links'

it('leads from a public release to all of its campaign, and from any other to itself, since those may be nowhere', () => {
  expect(releaseLinks('north', 2, null, true).all).toBe('/r/north')
  expect(releaseLinks('north', 2, 'secret', false).all).toBe('/r/north/2?key=secret')
  expect(releaseLinks('north', 2, null, false).all).toBe('/r/north/2')
})
