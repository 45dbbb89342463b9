/**
 * Order statistics without sorting: Hoare's quickselect with a median-of-three pivot, O(n) on average, in place.
 * Source: C. A. R. Hoare, "Algorithm 65: Find", CACM 4, 321 (1961).
 */

/**
 * Reorders `values[0..count)` so that the element of rank `rank` (0-based, ascending) stands at index `rank`, nothing
 * before it is larger and nothing after it is smaller. Returns that element.
 * @param values finite numbers (NaN breaks the order); changed in place.
 * @param rank whole number in [0, count).
 */
export function selectRank(values: Float32Array | Float64Array, rank: number, count: number = values.length): number {
  let left = 0
  let right = count - 1
  while (left < right) {
    const pivot = medianOfThree(values[left], values[(left + right) >> 1], values[right])
    let i = left
    let j = right
    while (i <= j) {
      while (values[i] < pivot) i++
      while (values[j] > pivot) j--
      if (i <= j) {
        const held = values[i]
        values[i] = values[j]
        values[j] = held
        i++
        j--
      }
    }
    if (rank <= j) right = j
    else if (rank >= i) left = i
    else break
  }
  return values[rank]
}

/** Median of `values[0..count)`, the mean of the two middle values when the count is even; NaN when empty. In place. */
export function selectMedian(values: Float32Array | Float64Array, count: number = values.length): number {
  if (count === 0) return Number.NaN
  const upper = count >> 1
  const high = selectRank(values, upper, count)
  if (count % 2 === 1) return high
  return (largestOf(values, upper) + high) / 2
}

/**
 * Quantile by linear interpolation between ranks, h = (n - 1) q (numpy's method "linear", type 7 of Hyndman & Fan 1996,
 * The American Statistician 50, 361). In place; NaN when empty.
 * @param fraction in [0, 1].
 */
export function selectQuantile(
  values: Float32Array | Float64Array,
  fraction: number,
  count: number = values.length,
): number {
  if (count === 0) return Number.NaN
  const position = (count - 1) * Math.min(1, Math.max(0, fraction))
  const rank = Math.floor(position)
  const low = selectRank(values, rank, count)
  const share = position - rank
  if (share === 0 || rank + 1 >= count) return low
  let high = Number.POSITIVE_INFINITY
  for (let i = rank + 1; i < count; i++) if (values[i] < high) high = values[i]
  return low + share * (high - low)
}

/** The finite members of `values`, in order, as doubles. */
export function finiteValues(values: ArrayLike<number>): Float64Array {
  const kept = new Float64Array(values.length)
  let count = 0
  for (let i = 0; i < values.length; i++) {
    const value = values[i]
    if (value - value === 0) kept[count++] = value
  }
  return kept.subarray(0, count)
}

function largestOf(values: Float32Array | Float64Array, count: number): number {
  let largest = values[0]
  for (let i = 1; i < count; i++) if (values[i] > largest) largest = values[i]
  return largest
}

function medianOfThree(a: number, b: number, c: number): number {
  if (a < b) return b < c ? b : a < c ? c : a
  return a < c ? a : b < c ? c : b
}
