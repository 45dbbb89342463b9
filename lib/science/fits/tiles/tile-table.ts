// The binary table that holds a tile-compressed image: one row a tile, its bytes in the heap (FITS Standard 4.0, 7.3 and 10.1).
import { integerValue } from '@/lib/science/fits/header-values'
import { FitsError } from '@/lib/science/fits/fits-types'
import type { Unit } from '@/lib/science/fits/find-units'

/** Bytes of one element by TFORM letter (table 18 of the standard); X and A do not occur in these columns. */
const ELEMENT_BYTES: Readonly<Record<string, number>> = {
  L: 1,
  X: 1,
  B: 1,
  I: 2,
  J: 4,
  K: 8,
  A: 1,
  E: 4,
  D: 8,
  C: 8,
  M: 16,
  P: 8,
  Q: 16,
}
const TFORM = /^\s*(\d*)([LXBIJKAEDCMPQ])([LXBIJKAEDCM])?/

interface Column {
  offset: number
  code: string
  /** Of a P or Q column: the letter of the elements in the heap. */
  heapCode: string
}

export interface HeapArray {
  bytes: Uint8Array
  elementBytes: number
  code: string
}

export class TileTable {
  readonly rows: number
  private readonly columns = new Map<string, Column>()
  private readonly view: DataView
  private readonly rowBytes: number
  private readonly heapStart: number

  constructor(
    bytes: Uint8Array,
    private readonly unit: Unit,
  ) {
    const { header, hdu, axes, dataStart, dataBytes } = unit
    if (axes.length !== 2 || unit.bitpix !== 8) {
      throw new FitsError(
        'bad-header',
        `HDU ${hdu} is a binary table, so BITPIX must be 8 and NAXIS 2; it has ${unit.bitpix} and ${axes.length}.`,
      )
    }
    ;[this.rowBytes, this.rows] = axes
    this.view = new DataView(bytes.buffer, bytes.byteOffset + dataStart, dataBytes)
    this.heapStart = integerValue(header, 'THEAP', hdu, this.rowBytes * this.rows)
    this.readColumns()
  }

  has(name: string): boolean {
    return this.columns.has(name)
  }

  /** The heap array that a row points to; null where the column is absent or empty in this row. */
  heapArray(name: string, row: number): HeapArray | null {
    const column = this.columns.get(name)
    if (column === undefined || (column.code !== 'P' && column.code !== 'Q')) return null
    const at = row * this.rowBytes + column.offset
    const [count, offset] =
      column.code === 'P'
        ? [this.view.getInt32(at), this.view.getInt32(at + 4)]
        : [Number(this.view.getBigInt64(at)), Number(this.view.getBigInt64(at + 8))]
    if (count === 0) return null
    const elementBytes = ELEMENT_BYTES[column.heapCode] ?? 1
    const start = this.heapStart + offset
    if (count < 0 || offset < 0 || this.heapStart < 0 || start + count * elementBytes > this.view.byteLength) {
      throw new FitsError(
        'corrupt-compression',
        `Tile ${row + 1} of HDU ${this.unit.hdu} points to ${count * elementBytes} bytes at offset ${offset} of the heap, outside its ${Math.max(0, this.view.byteLength - this.heapStart)} bytes.`,
      )
    }
    return {
      bytes: new Uint8Array(this.view.buffer, this.view.byteOffset + start, count * elementBytes),
      elementBytes,
      code: column.heapCode,
    }
  }

  /** A number of one row: from the column, else from the keyword of the same name, else null. */
  number(name: string, row: number): number | null {
    const column = this.columns.get(name)
    if (column !== undefined) {
      const at = row * this.rowBytes + column.offset
      if (column.code === 'D') return this.view.getFloat64(at)
      if (column.code === 'E') return this.view.getFloat32(at)
      if (column.code === 'J') return this.view.getInt32(at)
      if (column.code === 'I') return this.view.getInt16(at)
      throw new FitsError(
        'unsupported',
        `Column ${name} of HDU ${this.unit.hdu} has type ${column.code}; D, E, J and I are read.`,
      )
    }
    const value = this.unit.header[name]
    return typeof value === 'number' ? value : null
  }

  private readColumns(): void {
    const { header, hdu } = this.unit
    const count = integerValue(header, 'TFIELDS', hdu)
    let offset = 0
    for (let field = 1; field <= Math.min(count, 999); field++) {
      const form = TFORM.exec(String(header[`TFORM${field}`] ?? ''))
      if (form === null) {
        throw new FitsError(
          'bad-header',
          `HDU ${hdu} has TFORM${field} = ${header[`TFORM${field}`] ?? 'nothing'}, which is no column format.`,
        )
      }
      const [, repeat, code, heapCode = ''] = form
      const elements = repeat === '' ? 1 : Number(repeat)
      const name = String(header[`TTYPE${field}`] ?? '').toUpperCase()
      if (elements > 0 && !this.columns.has(name)) this.columns.set(name, { offset, code, heapCode })
      offset += code === 'X' ? Math.ceil(elements / 8) : elements * ELEMENT_BYTES[code]
    }
    if (offset !== this.rowBytes) {
      throw new FitsError(
        'bad-header',
        `The columns of HDU ${hdu} take ${offset} bytes a row, but NAXIS1 is ${this.rowBytes}.`,
      )
    }
  }
}
