import { expect, it } from 'vitest'
import { waldBoundaries } from '@/lib/science/agreement/sequential-test'
import { chooseLooks, type LookInReach } from './choose-looks'

const SHARP = { lens: [0.9, 0.05, 0.03, 0.02], notLens: [0.02, 0.03, 0.05, 0.9] }
const BLUNT = { lens: [0.4, 0.3, 0.2, 0.1], notLens: [0.1, 0.2, 0.3, 0.4] }
// Upper boundary ln(0.9 / 0.05) = 2.89, lower ln(0.1 / 0.95) = -2.25.
const BOUNDARIES = waldBoundaries({ falseConfirmed: 0.05, missedLens: 0.1 })

// An A of the sharp grader weighs ln 45 = 3.81 and an N as much against; of the blunt ln 4 = 1.39.
const far: LookInReach = { evidence: 0, probability: 0.5, grades: 1, heldByOthers: 0 }
const near: LookInReach = { evidence: 2, probability: 0.88, grades: 1, heldByOthers: 0 }
const named = (looks: Record<string, LookInReach>) => Object.entries(looks).map(([name, look]) => ({ name, ...look }))
const everybody = [SHARP, BLUNT]
const choose = (looks: Record<string, LookInReach>, own = BLUNT, count = 9, leastGrades = 1) =>
  chooseLooks(named(looks), { own, everybody, boundaries: BOUNDARIES, leastGrades }, count).map(({ name }) => name)

it('gives each grader what their look settles likelier than another’s', () => {
  // Near: sharp and blunt settle with an A alike, so that it is left to the blunt; far takes a sharp one.
  expect(choose({ near, far }, SHARP)).toEqual(['far', 'near'])
  expect(choose({ far, near }, BLUNT)).toEqual(['near', 'far'])
})

it('puts what somebody else looks at just now behind everything that nobody does', () => {
  expect(choose({ near: { ...near, heldByOthers: 1 }, far, other: { ...far, heldByOthers: 2 } })).toEqual([
    'far',
    'near',
    'other',
  ])
})

it('keeps the order given, of what a look tells, among equals and where no look can settle yet', () => {
  expect(choose({ second: far, first: far, near }, BLUNT, 9)).toEqual(['near', 'second', 'first'])
  expect(choose({ far: { ...far, grades: 0 }, near: { ...near, grades: 0 } }, BLUNT, 9, 2)).toEqual(['far', 'near'])
})

it('gives as many as are asked for, or all there are', () => {
  expect(choose({ far, near }, BLUNT, 1)).toEqual(['near'])
  expect(choose({}, BLUNT)).toEqual([])
})
