import { describe, expect, it } from 'vitest'
import { changeKey, KEY_ACTIONS, keyOf, readChoice, translateKey, type KeyChoice } from './key-choice'

function changed(choice: KeyChoice, action: string, key: string): KeyChoice {
  const change = changeKey(choice, action, key)
  if ('refused' in change) throw new Error(change.refused)
  return change.choice
}
const refusal = (choice: KeyChoice, action: string, key: string) => {
  const change = changeKey(choice, action, key)
  return 'refused' in change ? change.refused : null
}

describe('a key of one’s own', () => {
  it('stands for the action, whose former key then means nothing, in either case', () => {
    const choice = changed({}, 'N', 'j')
    expect(translateKey(choice, 'j')).toBe('N')
    expect(translateKey(choice, 'J')).toBe('N')
    expect(translateKey(choice, 'n')).toBeNull()
    expect(translateKey(choice, 'a')).toBe('a')
    expect(keyOf(choice, 'N')).toBe('J')
    expect(keyOf(choice, 'A')).toBe('A')
  })

  it('can be a key that another action has given up', () => {
    const choice = changed(changed({}, 'N', 'j'), 'T', 'n')
    expect(translateKey(choice, 'n')).toBe('T')
    expect(translateKey(choice, 't')).toBeNull()
    expect(translateKey(choice, 'j')).toBe('N')
  })

  it('goes back by giving the action the key that it came with', () => {
    expect(changed(changed({}, 'N', 'j'), 'N', 'n')).toEqual({})
  })

  it('takes the twin of a sign along', () => {
    const choice = changed({}, '+', 'p')
    expect(translateKey(choice, '=')).toBeNull()
    expect(translateKey({}, '=')).toBe('=')
  })
})

describe('a key is refused, in words,', () => {
  it.each([
    ['a', /^A is already the key for: grade A, sure\. Give that another key first\.$/],
    ['=', /^= is already the key for: closer/],
    ['4', /^4 shows a view/],
    ['?', /always opens the help/],
    [' ', /keep their places/],
    ['ArrowUp', /keep their places/],
    ['Enter', /keep their places/],
  ])('%j', (key, sentence) => {
    expect(refusal({}, 'T', key)).toMatch(sentence)
  })

  it('which another action was given', () => {
    expect(refusal(changed({}, 'N', 'j'), 'T', 'j')).toMatch(/not a lens/)
  })
})

describe('what was stored', () => {
  it('is read without what is no action', () => {
    expect(readChoice({ N: 'j', Q: 'v', T: 5 })).toEqual({ N: 'J' })
    expect(readChoice(null)).toEqual({})
  })

  it('is dropped where two actions would have one key', () => {
    expect(readChoice({ N: 'J', T: 'J' })).toEqual({})
    expect(readChoice({ N: 'A' })).toEqual({})
  })
})

it('no two actions come with one key', () => {
  expect(new Set(KEY_ACTIONS.map(({ key }) => key)).size).toBe(KEY_ACTIONS.length)
})
