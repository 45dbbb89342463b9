// RICE_1 tiles (FITS Standard 4.0, 10.4.1; R. F. Rice, P.-S. Yeh & W. Miller 1993, AIAA-93-4541): differences of neighbouring
// pixels in blocks, each block with its own number of plain low bits and the rest in unary.
//
// Written here because riceDecompress of fitsjs-ng reads past the end of a damaged stream and returns made-up pixels.

/** Bits that hold a block's split, and the split that marks a block of plain values, by bytes of a pixel. */
const PARAMETERS: Readonly<Record<number, { splitBits: number; plainSplit: number }>> = {
  1: { splitBits: 3, plainSplit: 6 },
  2: { splitBits: 4, plainSplit: 14 },
  4: { splitBits: 5, plainSplit: 25 },
}

/**
 * @param count pixels of the tile, @param blockSize pixels of a block, @param pixelBytes 1 (unsigned), 2 or 4.
 * @throws RangeError when the stream ends before the tile does, or for another pixel size.
 */
export function decodeRice(bytes: Uint8Array, count: number, blockSize: number, pixelBytes: number): Int32Array {
  const parameters = PARAMETERS[pixelBytes]
  if (parameters === undefined) throw new RangeError(`BYTEPIX is ${pixelBytes}, and only 1, 2 and 4 are read`)
  if (!Number.isInteger(blockSize) || blockSize < 1) throw new RangeError(`BLOCKSIZE is ${blockSize}`)
  const { splitBits, plainSplit } = parameters
  const plainBits = 8 * pixelBytes
  const unusedBits = 32 - plainBits
  const pixels = new Int32Array(count)
  let position = pixelBytes
  let buffer = 0
  let held = 0

  const need = (bits: number): void => {
    while (held < bits) {
      if (position >= bytes.length) throw new RangeError('its stream ends before the tile is full')
      buffer = ((buffer << 8) | bytes[position++]) & 0xffff
      held += 8
    }
  }
  const take = (bits: number): number => {
    let value = 0
    for (let left = bits; left > 0;) {
      const step = Math.min(left, 8)
      need(step)
      held -= step
      value = (value << step) | ((buffer >> held) & ((1 << step) - 1))
      left -= step
    }
    return value
  }
  const zeros = (): number => {
    let run = 0
    for (;;) {
      if (held === 0) need(8)
      const rest = buffer & ((1 << held) - 1)
      if (rest === 0) {
        run += held
        held = 0
        continue
      }
      const leading = Math.clz32(rest) - (32 - held)
      held -= leading + 1
      return run + leading
    }
  }

  /** Differences of n-bit pixels have n + 1 bits; a longer run of zeros is damage. */
  const high = (split: number): number => {
    const run = zeros()
    if (run >= 2 ** (plainBits + 1 - split)) throw new RangeError('its stream is damaged')
    return run
  }

  if (bytes.length < pixelBytes) throw new RangeError('its stream ends before the tile is full')
  let last = 0
  for (let i = 0; i < pixelBytes; i++) last = (last << 8) | bytes[i]
  const narrow =
    pixelBytes === 1 ? (value: number) => value & 0xff : (value: number) => (value << unusedBits) >> unusedBits
  last = narrow(last)
  for (let start = 0; start < count; start += blockSize) {
    const end = Math.min(start + blockSize, count)
    const split = take(splitBits) - 1
    for (let i = start; i < end; i++) {
      if (split >= 0) {
        const folded = split === plainSplit ? take(plainBits) : (high(split) << split) | take(split)
        const difference = (folded & 1) === 0 ? folded >>> 1 : ~(folded >>> 1)
        last = narrow(last + difference)
      }
      pixels[i] = last
    }
  }
  return pixels
}
