/** What the marks of the first pass come to. Pure. */

export type FirstPassState = 'waiting' | 'sent on' | 'dropped'
export type Mark = 'sent on' | 'dropped' | 'taken back'

/**
 * Of the newest mark of each person: sent on by anyone wins, dropped by anyone else drops. What somebody has graded counts as sent on
 * whatever the marks say: it is at the bench already.
 */
export function firstPassOf(marks: readonly { mark: Mark }[], graded = false): FirstPassState {
  if (graded || marks.some(({ mark }) => mark === 'sent on')) return 'sent on'
  return marks.some(({ mark }) => mark === 'dropped') ? 'dropped' : 'waiting'
}

/** Why a candidate is set aside that nobody has graded; with pseudonyms, because reasons leave the house with exports. */
export function notSentOnReason(pseudonyms: readonly string[]): string {
  const by = pseudonyms.length > 1 ? `${pseudonyms.slice(0, -1).join(', ')} and ${pseudonyms.at(-1)}` : pseudonyms[0]
  return `First pass: not sent on by ${by}. Nobody has graded it.`
}
