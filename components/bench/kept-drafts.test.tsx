import { beforeEach, expect, it } from 'vitest'
import { keepDrafts, keptDrafts } from './kept-drafts'

beforeEach(() => localStorage.clear())

const words = { 3: { tags: ['arc' as const], remark: 'thin' } }
const DAY_MS = 86_400_000

it('keeps words and tags by person, campaign and candidate, and forgets those that were sent', () => {
  keepDrafts(localStorage, 'north:7', {}, words, 0)
  expect(keptDrafts(localStorage, 'north:7', 10)).toEqual(words)
  expect(keptDrafts(localStorage, 'north:70', 10)).toEqual({})
  keepDrafts(localStorage, 'north:7', words, {}, 0)
  expect(keptDrafts(localStorage, 'north:7', 10)).toEqual({})
})

it('drops what is old, damaged or no tag any more', () => {
  keepDrafts(localStorage, 'north:7', {}, words, 0)
  expect(keptDrafts(localStorage, 'north:7', 15 * DAY_MS)).toEqual({})
  expect(localStorage).toHaveLength(0)
  localStorage.setItem('ringside:draft:north:7:4', '{"remark":')
  localStorage.setItem('ringside:draft:north:7:5', '{"remark":"x","tags":["arc","comet"],"at":0}')
  expect(keptDrafts(localStorage, 'north:7', 1)).toEqual({ 5: { remark: 'x', tags: ['arc'] } })
})

it('does without a storage that is forbidden', () => {
  expect(() => keepDrafts(null, 'north:7', {}, words, 0)).not.toThrow()
  expect(keptDrafts(null, 'north:7', 0)).toEqual({})
})
