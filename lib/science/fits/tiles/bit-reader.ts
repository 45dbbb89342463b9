/** Bits of a byte stream, most significant first. Throws RangeError past the end. */
export class BitReader {
  private buffer = 0
  private held = 0

  constructor(
    private readonly bytes: Uint8Array,
    private position: number,
  ) {}

  /** @param count 1 to 16. */
  take(count: number): number {
    while (this.held < count) {
      if (this.position >= this.bytes.length) throw new RangeError('its stream ends before the tile is full')
      this.buffer = ((this.buffer << 8) | this.bytes[this.position++]) & 0xffffff
      this.held += 8
    }
    this.held -= count
    return (this.buffer >> this.held) & ((1 << count) - 1)
  }

  /** Drops what is left of the current byte. */
  align(): void {
    this.held = 0
  }
}
