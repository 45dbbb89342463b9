// PLIO_1 tiles (FITS Standard 4.0, 10.4.4): IRAF's pixel lists, run lengths of 16-bit words, 4 bits of instruction and 12 of
// number. Written here because fitsjs-ng takes missing words for zeros.

/**
 * @param bytes big-endian 16-bit words: header, then instructions.
 * @returns `count` values of 0 to 2^24 - 1; what the list leaves out at the end is 0.
 * @throws RangeError when the list is longer than its words, runs past the tile or holds a negative value.
 */
export function decodePlio(bytes: Uint8Array, count: number): Int32Array {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.length)
  const words = bytes.length >> 1
  const word = (index: number): number => {
    if (index >= words) throw new RangeError('its list of runs is cut off')
    return view.getInt16(index * 2)
  }
  // Old lists hold their length in word 3 and begin at word 4; long ones hold it in words 4 and 5 and say in word 2 where they begin.
  const old = word(2) > 0
  const first = old ? 3 : word(1)
  const length = old ? word(2) : (word(4) << 15) + (word(3) & 0x7fff)
  if (first < 3 || length > words) throw new RangeError('its list of runs is cut off')
  const pixels = new Int32Array(count)
  let x = 0
  let high = 1
  const run = (pixelCount: number): void => {
    x += pixelCount
    if (x > count) throw new RangeError('its runs are longer than the tile')
  }
  for (let at = first; at < length; at++) {
    const instruction = word(at) & 0xffff
    const data = instruction & 0xfff
    switch (instruction >> 12) {
      case 0: // zeros
        run(data)
        break
      case 1: // set the high value, 24 bits in this word and the next
        high = (word(++at) << 12) + data
        break
      case 2:
        high += data
        break
      case 3:
        high -= data
        break
      case 4: // high values
        run(data)
        pixels.fill(high, x - data, x)
        break
      case 5: // zeros, then one high value
        run(data)
        if (data > 0) pixels[x - 1] = high
        break
      case 6: // change the high value and write it once
      case 7:
        high += instruction >> 12 === 6 ? data : -data
        run(1)
        pixels[x - 1] = high
        break
      default:
        throw new RangeError(`its list of runs has the unknown instruction ${instruction >> 12}`)
    }
    if (high < 0) throw new RangeError('its list of runs holds a negative value')
  }
  return pixels
}
