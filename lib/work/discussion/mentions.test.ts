import { describe, expect, it } from 'vitest'
import { labelsOf, partsOf, plainOf, resolveMentions } from './mentions'

const PEOPLE = [
  { personId: 1, name: 'avocet', pseudonym: 'G01' },
  { personId: 2, name: 'curlew', pseudonym: 'G02' },
  { personId: 3, name: 'curlew sandpiper', pseudonym: 'G03' },
  { personId: 4, name: 'Knot', pseudonym: 'G04' },
  { personId: 5, name: 'knot', pseudonym: 'G05' },
]

describe('a mention as it is written', () => {
  it('is kept under the pseudonym, the longest name that fits first, in any case of letters', () => {
    expect(resolveMentions('@Curlew sandpiper, ask @curlew (@avocet)!', PEOPLE, true)).toEqual({
      body: '@G03, ask @G02 (@G01)!',
      personIds: [3, 2, 1],
      unknown: [],
    })
    expect(resolveMentions('@g02 @G02', PEOPLE, true)).toEqual({ body: '@G02 @G02', personIds: [2], unknown: [] })
  })

  it('is none within a word, with a longer name behind it, or of nobody', () => {
    for (const text of ['curlew@curlew.test', 'x@avocet', 'at @ noon', '(@)', '@']) {
      expect(resolveMentions(text, PEOPLE, true)).toEqual({ body: text, personIds: [], unknown: [] })
    }
    const text = '@avocets, @ruff and (@ruff, @grey-plover). @ruff'
    expect(resolveMentions(text, PEOPLE, true)).toEqual({
      body: text,
      personIds: [],
      unknown: ['avocets', 'ruff', 'grey-plover'],
    })
  })

  it('goes by pseudonym alone for who may see no names, and for two people of one name', () => {
    expect(resolveMentions('@curlew @G02', PEOPLE, false)).toEqual({
      body: '@curlew @G02',
      personIds: [2],
      unknown: ['curlew'],
    })
    expect(resolveMentions('@knot @G05', PEOPLE, true)).toEqual({
      body: '@knot @G05',
      personIds: [5],
      unknown: ['knot'],
    })
    expect(labelsOf(PEOPLE, true).map(({ label }) => label)).toEqual([
      'avocet',
      'curlew',
      'curlew sandpiper',
      'G04',
      'G05',
    ])
  })
})

describe('a message as it is read', () => {
  const reader = { personId: 2, named: false }

  it('shows each reader the name that they may see, and who is meant', () => {
    const mentioned = PEOPLE.slice(1, 3)
    expect(partsOf('@G02 and @G03, not @G04', mentioned, reader)).toEqual([
      { kind: 'mention', label: 'G02', you: true },
      { kind: 'text', text: ' and ' },
      { kind: 'mention', label: 'G03', you: false },
      { kind: 'text', text: ', not @G04' },
    ])
    expect(plainOf(partsOf('@G02 and @G03', mentioned, { personId: 1, named: true }))).toBe(
      '@curlew and @curlew sandpiper',
    )
  })

  it('makes links of addresses of the web only, without the punctuation of the sentence', () => {
    expect(partsOf('See https://example.test/a?b=1&c=(2), or (http://x.test/y).', [], reader)).toEqual([
      { kind: 'text', text: 'See ' },
      { kind: 'link', href: 'https://example.test/a?b=1&c=(2' },
      { kind: 'text', text: '), or (' },
      { kind: 'link', href: 'http://x.test/y' },
      { kind: 'text', text: ').' },
    ])
    for (const text of ['javascript:alert(1)', 'data:text/html,x', '<b>bold</b>', 'https://']) {
      expect(partsOf(text, [], reader)).toEqual([{ kind: 'text', text }])
    }
  })
})
