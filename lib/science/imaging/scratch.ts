/** Of more pixels than the usual cutout's nothing is kept, so that one large cutout does not hold memory for ever. */
const MOST_KEPT = 2 ** 18

/** Room for one step of one picture at a time, kept between calls to spare allocations. What was written there stays. */
export class Scratch {
  #kept = new Float32Array(0)

  /** At least so long, with any content; the next call may give the same. */
  take(length: number): Float32Array {
    if (length > MOST_KEPT) return new Float32Array(length)
    if (this.#kept.length < length) this.#kept = new Float32Array(length)
    return this.#kept
  }
}
