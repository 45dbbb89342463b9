// The bit planes of HCOMPRESS: each plane of a quadrant is a quadtree of 2 x 2 cells whose four bits (8 4 / 2 1) are Huffman-coded
// (R. White, M. Postman & M. Lattanzi 1992, in Digitised Optical Sky Surveys, 167; the code table is that of FITS 4.0, 10.4.5).
import type { BitReader } from '@/lib/science/fits/tiles/bit-reader'

const PLAIN = 0
const CODED = 15

/** A rectangle within the coefficients. */
export interface Quadrant {
  start: number
  /** From one row to the next in the whole array. */
  stride: number
  rows: number
  columns: number
}

/** Adds the magnitudes of one quadrant to `values`, from the highest of `planes` bit planes down. */
export function addBitPlanes(reader: BitReader, values: Float64Array, quadrant: Quadrant, planes: number): void {
  const { rows, columns } = quadrant
  if (rows === 0 || columns === 0) return
  for (let bit = planes - 1; bit >= 0; bit--) {
    const format = reader.take(4)
    if (format !== PLAIN && format !== CODED) throw new RangeError('its stream is damaged')
    const cells =
      format === CODED ? readTree(reader, rows, columns) : readPlain(reader, ((rows + 1) >> 1) * ((columns + 1) >> 1))
    const weight = 2 ** bit
    forEachBit(cells, rows, columns, (row, column) => {
      values[quadrant.start + row * quadrant.stride + column] += weight
    })
  }
}

function readPlain(reader: BitReader, count: number): Uint8Array {
  const cells = new Uint8Array(count)
  for (let i = 0; i < count; i++) cells[i] = reader.take(4)
  return cells
}

/** Grows the tree from its root to the cells of `rows` by `columns` bits; each set bit of a level is a coded cell of the next. */
function readTree(reader: BitReader, rows: number, columns: number): Uint8Array {
  const levels = Math.ceil(Math.log2(Math.max(rows, columns)))
  let cells = Uint8Array.of(readCell(reader))
  for (let level = levels - 1; level >= 1; level--) {
    const [high, wide] = [Math.ceil(rows / 2 ** level), Math.ceil(columns / 2 ** level)]
    const next = new Uint8Array(high * wide)
    forEachBit(cells, high, wide, (row, column) => {
      next[row * wide + column] = 1
    })
    for (let i = next.length - 1; i >= 0; i--) if (next[i] !== 0) next[i] = readCell(reader)
    cells = next
  }
  return cells
}

function forEachBit(
  cells: Uint8Array,
  rows: number,
  columns: number,
  visit: (row: number, column: number) => void,
): void {
  const wide = (columns + 1) >> 1
  for (let i = 0; i < cells.length; i++) {
    const cell = cells[i]
    if (cell === 0) continue
    const row = 2 * Math.floor(i / wide)
    const column = 2 * (i % wide)
    const right = column + 1 < columns
    const below = row + 1 < rows
    if ((cell & 8) !== 0) visit(row, column)
    if ((cell & 4) !== 0 && right) visit(row, column + 1)
    if ((cell & 2) !== 0 && below) visit(row + 1, column)
    if ((cell & 1) !== 0 && below && right) visit(row + 1, column + 1)
  }
}

const FOUR_BITS: Readonly<Record<number, number>> = { 8: 3, 9: 5, 10: 10, 11: 12, 12: 15 }
const FIVE_BITS: Readonly<Record<number, number>> = { 26: 6, 27: 7, 28: 9, 29: 11, 30: 13 }

/** One Huffman-coded cell: codes of 3 to 6 bits. */
function readCell(reader: BitReader): number {
  let code = reader.take(3)
  if (code < 4) return 1 << code
  code = (code << 1) | reader.take(1)
  if (code in FOUR_BITS) return FOUR_BITS[code]
  code = (code << 1) | reader.take(1)
  if (code in FIVE_BITS) return FIVE_BITS[code]
  code = (code << 1) | reader.take(1)
  return code === 62 ? 0 : 14
}
