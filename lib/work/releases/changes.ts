import type { CandidateBeside } from '@/db/queries/release-changes'
import type { Column } from '@/lib/science/formats/columns'

/** One thing that a release says otherwise than the one before. */
export interface Change {
  name: string
  designation: string | null
  change: 'entered' | 'left' | 'state' | 'first judged' | 'not judged any more' | 'class' | 'name' | 'position'
  before: string | null
  after: string | null
}

const place = (ra: number | null, dec: number | null) => (ra === null || dec === null ? null : `${ra} ${dec}`)

/** What has changed of one candidate, the weightiest first. */
export function changesOf(row: CandidateBeside): Change[] {
  const { name, designation, fromState, toState } = row
  const changes: Change[] = []
  const add = (change: Change['change'], before: string | null, after: string | null) =>
    changes.push({ name, designation, change, before, after })
  if (fromState !== toState) {
    if (toState === 'confirmed') add('entered', fromState, toState)
    else if (fromState === 'confirmed') add('left', fromState, toState)
    else if (fromState === null) add('first judged', null, toState)
    else if (toState === null) add('not judged any more', fromState, null)
    else add('state', fromState, toState)
  }
  if (fromState === null || toState === null) return changes
  if (fromState === 'confirmed' && toState === 'confirmed' && row.fromClass !== row.toClass) {
    add('class', row.fromClass, row.toClass)
  }
  if (row.fromName !== name) add('name', row.fromName, name)
  const [from, to] = [place(row.fromRaDeg, row.fromDecDeg), place(row.toRaDeg, row.toDecDeg)]
  if (from !== to) add('position', from, to)
  return changes
}

/** `changes.csv` */
export const CHANGE_COLUMNS: readonly Column<Change>[] = [
  { name: 'name', datatype: 'unicodeChar', description: 'Name of the candidate', value: (row) => row.name },
  { name: 'designation', datatype: 'unicodeChar', description: 'Its designation', value: (row) => row.designation },
  { name: 'change', datatype: 'char', description: 'What has changed', value: (row) => row.change },
  { name: 'before', datatype: 'unicodeChar', description: 'In the release before', value: (row) => row.before },
  { name: 'after', datatype: 'unicodeChar', description: 'In this release', value: (row) => row.after },
]

const SAID: Record<Change['change'], (count: string) => string> = {
  entered: (count) => `${count} entered the catalogue`,
  left: (count) => `${count} left it`,
  class: (count) => `${count} changed class`,
  state: (count) => `${count} changed state without entering or leaving`,
  'first judged': (count) => `${count} judged for the first time and not in the catalogue`,
  'not judged any more': (count) => `${count} no longer judged`,
  name: (count) => `${count} renamed`,
  position: (count) => `${count} with another position`,
}

/** In words, by how many of each. */
export function changesInWords(counts: ReadonlyMap<Change['change'], number>, before: number | null): string {
  if (before === null) return 'This is the first release.'
  const parts = (Object.keys(SAID) as Change['change'][]).flatMap((change) => {
    const count = counts.get(change) ?? 0
    return count > 0 ? [SAID[change](String(count))] : []
  })
  if (parts.length === 0) return `Nothing has changed against release ${before}.`
  return `Against release ${before}: ${parts.join('; ')}.`
}
