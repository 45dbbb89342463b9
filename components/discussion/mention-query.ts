import type { Mentionable } from '@/lib/work/discussion/read-thread'

export interface MentionQuery {
  /** Where the @ stands, and what is written behind it up to the caret. */
  at: number
  written: string
}

const LONGEST = 60
const MOST_OFFERED = 6

/** The mention that is being written at the caret; null where none is. */
export function mentionQuery(text: string, caret: number): MentionQuery | null {
  const before = text.slice(Math.max(0, caret - LONGEST), caret)
  const at = before.lastIndexOf('@')
  if (at < 0) return null
  const written = before.slice(at + 1)
  const starts = at === 0 || /[\s([{“"'‘—–/]/.test(before[at - 1])
  return starts && !/[\n]|^\s/.test(written) ? { at: caret - written.length - 1, written } : null
}

/** Whom the written beginning may mean: by the beginning of the label or of one of its words. */
export function matching(people: readonly Mentionable[], written: string): Mentionable[] {
  const wanted = written.toLowerCase()
  const fits = ({ label }: Mentionable) =>
    label.toLowerCase().startsWith(wanted) ||
    label
      .toLowerCase()
      .split(/\s+/)
      .some((word) => word.startsWith(wanted))
  // A name that is written out is done: what follows is text.
  if (people.some(({ label }) => label.toLowerCase() === wanted.trimEnd() && wanted.endsWith(' '))) return []
  return people.filter(fits).slice(0, MOST_OFFERED)
}
