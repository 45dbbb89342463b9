/** A typed array that doubles its room as it fills. */
export class GrowingInts {
  length = 0
  #values = new Int32Array(1024)

  push(value: number): void {
    if (this.length === this.#values.length) {
      const larger = new Int32Array(this.length * 2)
      larger.set(this.#values)
      this.#values = larger
    }
    this.#values[this.length] = value
    this.length += 1
  }

  /** What is in it, without a copy. */
  taken(): Int32Array {
    return this.#values.subarray(0, this.length)
  }
}
