import { logOddsOf } from '@/lib/science/agreement/posterior'
import type { ReliabilityWhy } from '@/lib/work/rulings/explain-reliability'

/** Where on a drawn line a log odds lies, from 0 to 1, with room around everything that is shown. */
export function lineScale(
  why: Pick<ReliabilityWhy, 'steps' | 'prior' | 'confirm' | 'setAside'>,
): (logOdds: number) => number {
  const ends = [
    logOddsOf(why.prior),
    why.confirm.logOdds,
    why.setAside.logOdds,
    ...why.steps.map(({ to }) => to),
  ].filter(Number.isFinite)
  const [low, high] = [Math.min(...ends) - 1, Math.max(...ends) + 1]
  return (logOdds) => Math.min(1, Math.max(0, (logOdds - low) / (high - low)))
}

/** Probabilities worth a tick, of those that lie on the line: not nearer to each other than `apart` of it. */
export function ticksOf(scale: (logOdds: number) => number, apart = 1 / 9): number[] {
  const ticks: number[] = []
  for (const probability of [0.5, 0.9, 0.1, 0.99, 0.01, 0.999, 0.001, 0.9999, 0.0001, 0.99999, 0.00001]) {
    const at = scale(logOddsOf(probability))
    const free = ticks.every((other) => Math.abs(scale(logOddsOf(other)) - at) > apart)
    if (at > 0.02 && at < 0.98 && free) ticks.push(probability)
  }
  return ticks.sort((a, b) => a - b)
}
