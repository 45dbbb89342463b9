import { BinaryRowsError } from '@/lib/science/formats/votable-binary-rows'
import { XmlTextError } from '@/lib/science/formats/votable-text'

/** What was wrong with a VOTable, in the order of its lines; after about a hundred they are counted only. */
export interface VotableProblem {
  /** line in the file, from 1; null for the file as a whole */
  line: number | null
  /** a sentence: what is wrong and what to do */
  message: string
}

const MOST_PROBLEMS = 100

export class ProblemList {
  private readonly problems: VotableProblem[] = []
  private count = 0

  add(message: string, line: number | null): void {
    this.count++
    if (this.problems.length < MOST_PROBLEMS) this.problems.push({ line, message })
  }

  finish(): VotableProblem[] {
    const more = this.count - this.problems.length
    if (more === 0) return this.problems
    return [...this.problems, { line: null, message: `${more} more problems of this kind are not listed.` }]
  }
}

/** Why reading ended, what was read by then, and what to do. */
export function failureSentence(error: unknown, hasVotable: boolean, rowCount: number): string {
  const read = rowCount > 0 ? ` The ${rowCount} rows before are read.` : ''
  if (error instanceof XmlTextError) return error.message
  if (error instanceof BinaryRowsError) return `The binary data are damaged: ${error.message}.${read}`
  if (!hasVotable) {
    return 'This is not a VOTable: it does not begin as an XML file with the element VOTABLE. Choose another file.'
  }
  const why = (error instanceof Error ? error.message : String(error)).split('\n')[0].toLowerCase()
  return /unclosed root|unexpected end/.test(why)
    ? `The file ends in the middle; it may have been cut off on its way.${read} Fetch it again.`
    : `The file is not well-formed XML here (${why}).${read} Save or fetch it again.`
}
