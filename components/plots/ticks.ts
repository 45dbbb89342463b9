/** Steps that people count in, and where on a logarithmic scale one is nearer than the next. */
const STEPS = [
  { step: 1, below: Math.sqrt(2) },
  { step: 2, below: Math.sqrt(10) },
  { step: 5, below: Math.sqrt(50) },
  { step: 10, below: Infinity },
]

/** Step of about `about` ticks over the span: 1, 2 or 5 times a power of ten; 1 for a span of nothing. */
function tickStep(span: number, about: number): number {
  if (!(span > 0) || about < 1) return 1
  const rough = span / about
  const power = 10 ** Math.floor(Math.log10(rough))
  return power * (STEPS.find(({ below }) => rough / power < below)?.step ?? 10)
}

/**
 * Round values within [low, high], about as many as asked for, free of rounding dust: multiples of 0.1, 0.2, 0.5, 1, 2, 5, …
 * @returns one value where low is high; none where either is no finite number.
 */
export function niceTicks(low: number, high: number, about = 5): number[] {
  if (!Number.isFinite(low) || !Number.isFinite(high)) return []
  const step = tickStep(high - low, about)
  const decimals = Math.max(0, -Math.floor(Math.log10(step) + 1e-9))
  const ticks: number[] = []
  for (let at = Math.ceil(low / step - 1e-9); at * step <= high + step * 1e-9; at++) {
    // -0 would be written with its sign.
    ticks.push(Number((at * step).toFixed(decimals)) + 0)
  }
  return ticks
}

/** The end of an axis that begins at 0: the first round value at or above `high`. */
export function niceEnd(high: number, about = 4): number {
  if (!(high > 0)) return 1
  const step = tickStep(high, about)
  return Math.ceil(high / step - 1e-9) * step
}

/** Ticks with as many decimals as their step needs, a true minus sign, thousands apart. */
export function tickLabels(ticks: readonly number[]): string[] {
  const step = ticks.length > 1 ? Math.min(...ticks.slice(1).map((tick, at) => tick - ticks[at])) : 1
  const decimals = Math.max(0, Math.min(6, -Math.floor(Math.log10(step) + 1e-9)))
  const form = new Intl.NumberFormat('en', { minimumFractionDigits: decimals, maximumFractionDigits: decimals })
  return ticks.map((tick) => form.format(tick).replace('-', '−'))
}

/** Every how many of `count` labels fit, when each needs `labelWidth` of `width`: 1, 2, 5, 10, … */
export function labelEvery(count: number, width: number, labelWidth: number): number {
  const needed = (count * labelWidth) / Math.max(1, width)
  for (let power = 1; ; power *= 10) {
    const found = [1, 2, 5].find((step) => step * power >= needed)
    if (found) return found * power
  }
}

/** From the data to the drawing. A domain of nothing is drawn in the middle. */
export function linearScale([low, high]: [number, number], [from, to]: [number, number]): (value: number) => number {
  if (high === low) return () => (from + to) / 2
  return (value) => from + ((value - low) / (high - low)) * (to - from)
}
