/**
 * The connected parts of a graph of pairs: 'friends of friends' (J. Huchra & M. Geller, ApJ 257, 423, 1982), by union-find as in
 * lib/science/sky/duplicate-groups.ts, here from pairs that the database has found and a person has left standing.
 * @returns the ids of each group, ascending, and its smallest separation; the nearest group first.
 */
export function groupsOfPairs(
  pairs: readonly { firstId: number; secondId: number; separationArcsec: number }[],
): { ids: number[]; nearestArcsec: number }[] {
  const parent = new Map<number, number>()
  const rootOf = (id: number): number => {
    let at = id
    for (let up = parent.get(at) ?? at; up !== at; up = parent.get(at) ?? at) {
      parent.set(at, parent.get(up) ?? up)
      at = up
    }
    return at
  }
  for (const { firstId, secondId } of pairs) {
    parent.set(firstId, parent.get(firstId) ?? firstId)
    parent.set(secondId, parent.get(secondId) ?? secondId)
    parent.set(rootOf(firstId), rootOf(secondId))
  }
  const groups = new Map<number, { ids: number[]; nearestArcsec: number }>()
  for (const id of parent.keys()) {
    const root = rootOf(id)
    const group = groups.get(root)
    if (group) group.ids.push(id)
    else groups.set(root, { ids: [id], nearestArcsec: Infinity })
  }
  for (const { firstId, separationArcsec } of pairs) {
    const group = groups.get(rootOf(firstId))!
    group.nearestArcsec = Math.min(group.nearestArcsec, separationArcsec)
  }
  for (const group of groups.values()) group.ids.sort((a, b) => a - b)
  return [...groups.values()].sort((a, b) => a.nearestArcsec - b.nearestArcsec || a.ids[0] - b.ids[0])
}
