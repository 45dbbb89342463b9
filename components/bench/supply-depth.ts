/** How many candidates lie ready: as many as the person gets through while a network is away for a while. */
import type { Look } from './bench-session'

/** So much work lies ready (our choice): longer than most networks are away, shorter than others would wait for it. */
const WORK_SECONDS = 180
const LEAST = 6
const MOST_READY = 50
const RECENT = 20

/** @returns how many to ask for, and how few lie ready when it is asked again. */
export function supplyDepth(given: readonly Pick<Look, 'seconds'>[]): { target: number; low: number } {
  const recent = given
    .slice(-RECENT)
    .map(({ seconds }) => seconds)
    .sort((a, b) => a - b)
  const pace = recent.length < 5 ? Number.POSITIVE_INFINITY : recent[Math.floor(recent.length / 2)]
  const target = Math.min(MOST_READY, Math.max(LEAST, Math.ceil(WORK_SECONDS / Math.max(pace, 0.1))))
  return { target, low: Math.ceil((2 * target) / 3) }
}
