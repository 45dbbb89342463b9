import type { CandidateBeside, SaidOfCandidate } from '@/db/queries/release-changes'
import type { Column } from '@/lib/science/formats/columns'
import { labelsInWords } from './release-columns'

/** One thing that a release says otherwise than the one before. */
export interface Change {
  name: string
  designation: string | null
  change: 'entered' | 'left' | 'state' | 'first judged' | 'not judged any more' | keyof SaidOfCandidate
  before: string | null
  after: string | null
}

/** Of what was decided, measured and known, the weightiest first. */
const COMPARED: readonly (keyof SaidOfCandidate)[] = [
  'class',
  'name',
  'designation',
  'position',
  'ruling',
  'grades',
  'mean',
  'spread',
  'probability',
  'known objects',
  'Einstein radius',
  'error of the radius',
  'measured by',
  'lens redshift',
  'source redshift',
  'remarks',
  'tags',
  'pictures',
]
/** What an entry says in other words than a candidate that is none: compared where both are one, or neither. */
const OF_ENTRIES: ReadonlySet<keyof SaidOfCandidate> = new Set([
  'class',
  'designation',
  'grades',
  'mean',
  'spread',
  'probability',
  'known objects',
  'Einstein radius',
  'error of the radius',
  'measured by',
  'remarks',
  'tags',
  'pictures',
])

/** What has changed of one candidate, the weightiest first. */
export function changesOf({ fromState, toState, from, to }: CandidateBeside): Change[] {
  const { name, designation } = { ...from, ...to } as SaidOfCandidate
  const changes: Change[] = []
  const add = (change: Change['change'], before: string | null, after: string | null) =>
    changes.push({ name, designation: designation ?? from?.designation ?? null, change, before, after })
  if (fromState !== toState) {
    if (toState === 'confirmed') add('entered', fromState, toState)
    else if (fromState === 'confirmed') add('left', fromState, toState)
    else if (fromState === null) add('first judged', null, toState)
    else if (toState === null) add('not judged any more', fromState, null)
    else add('state', fromState, toState)
  }
  if (from === null || to === null) return changes
  const isAlike = (fromState === 'confirmed') === (toState === 'confirmed')
  for (const what of COMPARED) {
    const isSame = JSON.stringify(from[what]) === JSON.stringify(to[what])
    if (!isSame && (isAlike || !OF_ENTRIES.has(what))) add(what, inText(what, from), inText(what, to))
  }
  return changes
}

function inText(what: keyof SaidOfCandidate, said: SaidOfCandidate): string | null {
  if (what === 'known objects') return said[what] && labelsInWords({ known_as: said[what] })
  if (what === 'position') return said[what].includes(null) ? null : said[what].join(' ')
  return said[what] === null ? null : String(said[what])
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
  designation: (count) => `${count} with another designation`,
  position: (count) => `${count} with another position`,
  ruling: (count) => `${count} ruled on otherwise`,
  grades: (count) => `${count} with other grades`,
  mean: (count) => `${count} with another mean`,
  spread: (count) => `${count} with another spread`,
  probability: (count) => `${count} with another probability`,
  'known objects': (count) => `${count} with other known objects`,
  'Einstein radius': (count) => `${count} with another Einstein radius`,
  'error of the radius': (count) => `${count} with another error of it`,
  'measured by': (count) => `${count} measured by more or fewer people`,
  'lens redshift': (count) => `${count} with another lens redshift`,
  'source redshift': (count) => `${count} with another source redshift`,
  remarks: (count) => `${count} with other remarks`,
  tags: (count) => `${count} with other tags`,
  pictures: (count) => `${count} with other pictures`,
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
