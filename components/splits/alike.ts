import type { SplitCase } from '@/lib/work/rulings/list-splits'

type Compared = Pick<SplitCase, 'id' | 'votes' | 'probability'>

/** The tenth of probability that it lies in: 0 for 0 to 0.1, 9 for 0.9 to 1. */
const tenth = (probability: number) => Math.min(9, Math.floor(probability * 10))

const sameVotes = (a: Compared, b: Compared) =>
  (['A', 'B', 'C', 'N', 'U'] as const).every((letter) => a.votes[letter] === b.votes[letter])

/** The splits that are like this one, itself included: in the same tenth of probability, or by the mean with the same votes. */
export function alikeTo(cases: readonly Compared[], id: number): number[] {
  const one = cases.find((other) => other.id === id)
  if (!one) return []
  const isAlike = (other: Compared) =>
    one.probability === null || other.probability === null
      ? sameVotes(one, other)
      : tenth(one.probability) === tenth(other.probability)
  return cases.filter(isAlike).map((other) => other.id)
}

/** In what they are alike, for the button that selects them. */
export function alikeInWords(one: Pick<SplitCase, 'probability'>): string {
  if (one.probability === null) return 'with the same votes'
  const from = tenth(one.probability) / 10
  return `with a probability of ${from.toFixed(1)} to ${(from + 0.1).toFixed(1)}`
}
