/**
 * Groups of positions that stand for one object: 'friends of friends', the connected parts of the graph of pairs closer than
 * the linking length. Source: J. Huchra & M. Geller, ApJ 257, 423 (1982). A chain of friends may be longer than the length;
 * each group says how wide it is, so that a person can see it.
 * Union-find with path halving and union by size: R. Tarjan & J. van Leeuwen, J. ACM 31, 245 (1984).
 */
import { matchWithin } from './match-positions'
import type { Positions } from './position-index'
import { separationArcsec } from './separation'

export interface DuplicateGroup {
  /** places in the list, ascending; two or more */
  places: number[]
  /** largest separation of any two members, arcsec */
  widestArcsec: number
  /** some two members are further apart than the linking length and hang together only through others */
  isChain: boolean
}

/**
 * @param linkingLengthArcsec 0 to 648000, the end included.
 * @returns groups of two or more, in the order of their first members. Unusable positions are in none.
 * @throws RangeError for another length.
 */
export function duplicateGroups(positions: Positions, linkingLengthArcsec: number): DuplicateGroup[] {
  const { first, second } = matchWithin(positions, linkingLengthArcsec)
  const parent = Int32Array.from(positions.raDeg, (_, place) => place)
  const size = new Int32Array(parent.length).fill(1)
  const rootOf = (place: number): number => {
    let at = place
    while (parent[at] !== at) {
      parent[at] = parent[parent[at]]
      at = parent[at]
    }
    return at
  }
  for (let pair = 0; pair < first.length; pair++) {
    const a = rootOf(first[pair])
    const b = rootOf(second[pair])
    if (a === b) continue
    const [smaller, larger] = size[a] < size[b] ? [a, b] : [b, a]
    parent[smaller] = larger
    size[larger] += size[smaller]
  }
  const members = new Map<number, number[]>()
  for (let place = 0; place < parent.length; place++) {
    const root = rootOf(place)
    if (size[root] === 1) continue
    const group = members.get(root)
    if (group) group.push(place)
    else members.set(root, [place])
  }
  return [...members.values()].map((places) => {
    const widestArcsec = widest(positions, places)
    return { places, widestArcsec, isChain: widestArcsec > linkingLengthArcsec }
  })
}

function widest({ raDeg, decDeg }: Positions, places: readonly number[]): number {
  let result = 0
  const at = (place: number) => ({ raDeg: raDeg[place], decDeg: decDeg[place] })
  for (const [k, place] of places.entries()) {
    for (let other = 0; other < k; other++) {
      result = Math.max(result, separationArcsec(at(place), at(places[other])))
    }
  }
  return result
}
