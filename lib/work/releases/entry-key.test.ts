import fc from 'fast-check'
import { expect, it } from 'vitest'
import { designation } from '@/lib/science/sky/designation'
import { entryKey, freeKey } from './entry-key'

it.each([
  ['SWS J235959.97-000000.0', 'SWS-J235959.97-000000.0'],
  ['SWS J100024.00+021200.0 (2)', 'SWS-J100024.00+021200.0-2'],
  ['A/B#C? J010203.04-050607.8', 'A-B-C-J010203.04-050607.8'],
])('makes of the designation %s the key %s', (name, key) => {
  expect(entryKey(name)).toBe(key)
})

it('is a part of an address as it stands, whatever the acronym', () => {
  const acronyms = fc.stringMatching(/^[\x21-\x7e]{3,12}$/)
  fc.assert(
    fc.property(acronyms, fc.double({ min: 0, max: 359.9, noNaN: true }), (acronym, raDeg) => {
      const key = entryKey(designation(acronym, raDeg, -1))
      expect(new URL(`https://x.test/r/n/1/${key}`).pathname).toBe(`/r/n/1/${key}`)
    }),
  )
})

it('gives two designations that come to the same key two keys', () => {
  const taken = new Set<string>()
  expect([freeKey('A/B J1', taken), freeKey('A-B J1', taken), freeKey('A?B J1', taken)]).toEqual([
    'A-B-J1',
    'A-B-J1_2',
    'A-B-J1_3',
  ])
})
