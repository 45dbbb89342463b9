/** When a break is offered, and what a sitting came to. Numbers are our choice, without a source. */
import type { GradeLetter } from '@/db/schema/grading'
import type { Look } from './bench-session'
import { gradeName } from './grade-words'

/** A stretch without a pause. */
const LONG_MS = 50 * 60_000
/** So long without a grade is a pause. */
const PAUSE_MS = 5 * 60_000
/** So many in a row whose median is shorter than anybody looks at an image with care. */
const QUICK_LOOKS = 20
const QUICK_SECONDS = 1.5

export type BreakOffer = 'long' | 'quick'

type Pace = Pick<Look, 'at' | 'seconds'>

/**
 * @param looks of the sitting, in order.
 * @param declinedAt when the last offer was declined or taken: only what came after it counts. 0: never.
 * @param now milliseconds since 1970: who has been away for a while has had a pause.
 */
export function breakOffer(looks: readonly Pace[], declinedAt: number, now: number): BreakOffer | null {
  const since = looks.filter(({ at }) => at > declinedAt)
  const last = since.at(-1)
  if (!last || now - last.at >= PAUSE_MS) return null
  const recent = since.slice(-QUICK_LOOKS).map(({ seconds }) => seconds)
  if (recent.length === QUICK_LOOKS && median(recent) < QUICK_SECONDS) return 'quick'
  let first = since.length - 1
  while (first > 0 && since[first].at - since[first - 1].at < PAUSE_MS) first--
  return last.at - since[first].at >= LONG_MS ? 'long' : null
}

function median(values: readonly number[]): number {
  const sorted = values.toSorted((a, b) => a - b)
  return (sorted[Math.floor((sorted.length - 1) / 2)] + sorted[Math.ceil((sorted.length - 1) / 2)]) / 2
}

export const OFFERS: Record<BreakOffer, string> = {
  long: 'You have looked for a long while. A few minutes away rest the eyes.',
  quick: 'The last twenty went by fast. A short break may help.',
}

const ORDER: GradeLetter[] = ['A', 'B', 'C', 'N', 'U']

/** `In this sitting you graded 23 candidates: 2 sure, 21 not a lens. You looked for 18 minutes.` Nothing to compare oneself with. */
export function sittingSentence(given: readonly Look[]): string {
  if (given.length === 0) return ''
  const parts = ORDER.flatMap((letter) => {
    const number = given.filter(({ answer }) => answer.grade === letter).length
    return number > 0 ? [`${number} ${gradeName(letter).toLowerCase()}`] : []
  })
  const many = given.length === 1 ? 'one candidate' : `${given.length} candidates`
  return `In this sitting you graded ${many}: ${parts.join(', ')}. You looked for ${lookedFor(given)}.`
}

/** A picture that stayed in sight over lunch was not looked at for so long. */
function lookedFor(given: readonly Look[]): string {
  const milliseconds = given.reduce((sum, { seconds }) => sum + Math.min(PAUSE_MS, 1000 * seconds), 0)
  const minutes = Math.round(milliseconds / 60_000)
  if (minutes < 1) return 'less than a minute'
  if (minutes === 1) return 'a minute'
  if (minutes < 90) return `${minutes} minutes`
  return `${Math.floor(minutes / 60)} h ${minutes % 60} min`
}
