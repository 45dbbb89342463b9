import { SeededRandom } from '@/lib/science/lensing/seeded-random'

export interface FinishEstimate {
  given: number
  /** looks that are still to come: by the expectation, at the least, at the most */
  remaining: { expected: number; least: number; most: number }
  /** looks in each of the last seven times 24 hours, the oldest first */
  lastDays: number[]
  /** looks a day with the interval of the mean; null where there is no estimate */
  pace: { value: number; low: number; high: number } | null
  /** `late` is null where the slow end of the pace is none */
  finish: { early: string; likely: string; late: string | null } | null
  /** why there is no estimate; null where there is one */
  reason: string | null
}

const PACE_DAYS = 7
/** Fewer days than this with a look say nothing of a pace. Our choice, no source. */
const LEAST_ACTIVE_DAYS = 3
const DAY_MS = 86_400_000
const RESAMPLES = 2000

/**
 * When the looks will all be given, if the last seven days go on. The pace is the mean of the seven days, quiet ones too; its
 * interval is the 95 % bootstrap interval of that mean (days drawn again with replacement, seeded), and the range of the finish
 * takes the fast end with the least looks to come and the slow end with the most.
 * @param lookTimes milliseconds since 1970, any order.
 */
export function estimateFinish(
  lookTimes: Iterable<number>,
  given: number,
  remaining: FinishEstimate['remaining'],
  now: number,
): FinishEstimate {
  const lastDays = new Array<number>(PACE_DAYS).fill(0)
  for (const time of lookTimes) {
    const ago = Math.floor((now - time) / DAY_MS)
    if (ago >= 0 && ago < PACE_DAYS) lastDays[PACE_DAYS - 1 - ago] += 1
  }
  const without = (reason: string): FinishEstimate => {
    return { given, remaining, lastDays, pace: null, finish: null, reason }
  }
  if (remaining.most === 0) return without('No look is wanting.')
  const active = lastDays.filter((looks) => looks > 0).length
  if (active === 0) return without('No estimate: nobody has given a look in the last 7 days.')
  if (active < LEAST_ACTIVE_DAYS) {
    const days = active === 1 ? 'one' : 'two'
    return without(`No estimate: looks were given on only ${days} of the last 7 days, which is no pace yet.`)
  }
  const pace = meanWithInterval(lastDays)
  const after = (looks: number, aDay: number) => new Date(now + (looks / aDay) * DAY_MS).toISOString()
  return {
    given,
    remaining,
    lastDays,
    pace,
    finish: {
      early: after(remaining.least, pace.high),
      likely: after(remaining.expected, pace.value),
      late: pace.low > 0 ? after(remaining.most, pace.low) : null,
    },
    reason: null,
  }
}

function meanWithInterval(days: readonly number[]): { value: number; low: number; high: number } {
  const random = new SeededRandom(20261205)
  const mean = (draw: () => number) => days.reduce((sum) => sum + draw(), 0) / days.length
  const means = Array.from({ length: RESAMPLES }, () => mean(() => days[random.integer(0, days.length - 1)]))
  means.sort((a, b) => a - b)
  return {
    value: days.reduce((sum, looks) => sum + looks, 0) / days.length,
    low: means[Math.floor(0.025 * RESAMPLES)],
    high: means[Math.ceil(0.975 * RESAMPLES) - 1],
  }
}
