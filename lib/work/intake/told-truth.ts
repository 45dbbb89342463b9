/** What a manifest tells of calibration stamps: what they are known to be, and a sentence for practice. Pure. */
import { UNSEEN } from './file-name'

export type Truth = 'lens' | 'not a lens'

const LENS = new Set(['lens', 'true', 'yes', 't', 'y'])
const NOT_A_LENS = new Set(['notalens', 'notlens', 'nonlens', 'nolens', 'false', 'no', 'f', 'n'])

/** Case, blanks, `_` and `-` do not count; a number is 1 or 0, written in any way. */
export function truthOf(text: string | null, header: string | undefined, fault: (sentence: string) => void) {
  if (text === null) return null
  const word = text.toLowerCase().replace(/[\s_-]/g, '')
  if (LENS.has(word) || (word !== '' && Number(word) === 1)) return 'lens'
  if (NOT_A_LENS.has(word) || (word !== '' && Number(word) === 0)) return 'not a lens'
  const allowed = "'lens' or 'not a lens' (also 1 or 0, true or false, yes or no, nonlens)"
  fault(`${header} is '${text}'; it is ${allowed}. This line makes no calibration stamp.`)
  return null
}

const MOST_CHARACTERS = 1000

export function explanationOf(text: string | null, header: string | undefined, fault: (sentence: string) => void) {
  if (text === null) return null
  const characters = text.length.toLocaleString('en')
  if (text.length > MOST_CHARACTERS)
    fault(`${header} has ${characters} characters; it has 1,000 at most, so it is left out.`)
  else if (UNSEEN.test(text)) fault(`${header} holds control characters, so it is left out.`)
  else return text
  return null
}

export const inWords = (truth: Truth): string => (truth === 'lens' ? 'a lens' : 'not a lens')

/** One sentence for each line that says otherwise of a candidate than a line before. */
export function contradictions(
  entries: readonly { line: number; candidate: string | null; truth: Truth | null }[],
): string[] {
  const before = new Map<string, { line: number; truth: Truth }>()
  const sentences: string[] = []
  for (const { line, candidate, truth } of entries) {
    if (candidate === null || truth === null) continue
    const other = before.get(candidate)
    if (other && other.truth !== truth) {
      sentences.push(
        `Line ${line}: ${candidate} is ${inWords(truth)} here and ${inWords(other.truth)} on line ${other.line}. The last of them holds.`,
      )
    }
    before.set(candidate, { line, truth })
  }
  return sentences
}
