import { expect, it } from 'vitest'
import { ownPath } from './own-path'

it.each(['/', '/campaigns/north-field/splits?id=7', '/invitation/abc_-123', '/campaigns/north-field#top'])(
  'keeps the path %s of this site',
  (path) => {
    expect(ownPath(path)).toBe(path)
  },
)

// The forms are those that browsers read as another site: two slashes, backslashes, and characters that they drop.
it.each([
  'https://evil.test/',
  '//evil.test',
  '/\\evil.test',
  '\\\\evil.test',
  '/\t/evil.test',
  '/\n/evil.test',
  '/.//evil.test',
  '/a/..//evil.test',
  'javascript:alert(1)',
  'campaigns',
  '',
  undefined,
  ['/a', '/b'],
])('leads home instead of to %j', (text) => {
  expect(ownPath(text)).toBe('/')
})

it('does not lead back to signing in or to an address for scripts', () => {
  expect(ownPath('/signin?next=/')).toBe('/')
  expect(ownPath('/api/campaigns')).toBe('/')
})
