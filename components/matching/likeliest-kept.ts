import type { DuplicateGroup } from '@/lib/work/matching/duplicates-page'

const STANDING = ['set aside', 'open', 'split', 'confirmed']

/** Place of the member to keep unless somebody chooses: what is confirmed, then what has most grades, then the first. */
export function likeliestKept({ members }: Pick<DuplicateGroup, 'members'>): number {
  const grades = ({ votes }: DuplicateGroup['members'][number]) => votes.A + votes.B + votes.C + votes.N
  const rank = (place: number) => STANDING.indexOf(members[place].state) * 10_000 + grades(members[place])
  return members.reduce((best, _, place) => (rank(place) > rank(best) ? place : best), 0)
}
