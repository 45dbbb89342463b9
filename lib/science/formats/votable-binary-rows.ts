/**
 * Rows of the BINARY and BINARY2 serialisations, as their bytes come in. Source: VOTable 1.4 sections 2.1
 * (sizes), 5 and 6; most significant byte first.
 */
import type { ColumnStore, VotableField } from '@/lib/science/formats/votable-fields'

/** Bytes of one value; of bit, one for each eight. */
const SIZES: Readonly<Record<string, number>> = {
  boolean: 1,
  bit: 1,
  unsignedByte: 1,
  short: 2,
  int: 4,
  long: 8,
  char: 1,
  unicodeChar: 2,
  float: 4,
  double: 8,
  floatComplex: 8,
  doubleComplex: 16,
}

/** No cell of a reference list is longer; a length beyond it is damage, not data. */
const LONGEST_CELL_BYTES = 2 ** 24

interface Shape {
  datatype: string
  /** number of values, or of values for each one counted before them */
  count: number
  isVariable: boolean
  isScalar: boolean
}

/** Damage after which no further row can be found. */
export class BinaryRowsError extends Error {
  readonly name = 'BinaryRowsError'
}

export class BinaryRows {
  rowCount = 0
  private rest: Uint8Array = new Uint8Array(0)
  private readonly shapes: Shape[]
  private readonly flagBytes: number
  private readonly ascii = new TextDecoder('utf-8')
  private readonly utf16 = new TextDecoder('utf-16be')
  /** Ends of the cells of the row being read, so that nothing is stored before the row is whole. */
  private readonly begins: Int32Array
  private readonly ends: Int32Array

  constructor(
    fields: readonly VotableField[],
    private readonly stores: readonly ColumnStore[],
    hasFlags: boolean,
  ) {
    this.shapes = fields.map(shapeOf)
    this.flagBytes = hasFlags ? Math.ceil(fields.length / 8) : 0
    this.begins = new Int32Array(fields.length)
    this.ends = new Int32Array(fields.length)
  }

  /** Bytes that are left over and make no whole row. */
  get leftOver(): number {
    return this.rest.length
  }

  /** @throws BinaryRowsError for a length that no cell has. */
  push(bytes: Uint8Array): void {
    const all = this.rest.length === 0 ? bytes : joined(this.rest, bytes)
    const view = new DataView(all.buffer, all.byteOffset, all.byteLength)
    let at = 0
    for (;;) {
      const end = this.measure(view, at)
      if (end < 0) break
      this.store(all, view, at)
      this.rowCount++
      at = end
      // A table whose rows have no bytes has no rows.
      if (this.shapes.length === 0) break
    }
    this.rest = all.slice(at)
  }

  /** Where the row that begins at `from` ends; -1 while it is not all there. */
  private measure(view: DataView, from: number): number {
    let at = from + this.flagBytes
    for (let k = 0; k < this.shapes.length; k++) {
      const { datatype, count, isVariable } = this.shapes[k]
      let values = count
      if (isVariable) {
        if (at + 4 > view.byteLength) return -1
        values = count * view.getUint32(at)
        at += 4
      }
      const bytes = datatype === 'bit' ? Math.ceil(values / 8) : values * SIZES[datatype]
      if (bytes > LONGEST_CELL_BYTES) {
        throw new BinaryRowsError(`row ${this.rowCount + 1} claims a cell of ${bytes} bytes`)
      }
      this.begins[k] = at
      at += bytes
      this.ends[k] = at
    }
    return at <= view.byteLength && at > from ? at : -1
  }

  private store(bytes: Uint8Array, view: DataView, from: number): void {
    for (let k = 0; k < this.shapes.length; k++) {
      const isMissing = this.flagBytes > 0 && (bytes[from + (k >> 3)] & (0x80 >> (k & 7))) !== 0
      const shape = this.shapes[k]
      const store = this.stores[k]
      const [begin, end] = [this.begins[k], this.ends[k]]
      if (isMissing) store.addMissing()
      else if (shape.datatype === 'char') store.addText(untilNull(this.ascii.decode(bytes.subarray(begin, end))))
      else if (shape.datatype === 'unicodeChar') store.addText(untilNull(this.utf16.decode(bytes.subarray(begin, end))))
      else if (shape.isScalar && shape.datatype !== 'long' && shape.datatype !== 'bit' && !isComplex(shape.datatype)) {
        store.addNumber(numberAt(view, begin, shape.datatype))
      } else store.addText(listText(view, begin, end, shape))
    }
  }
}

function shapeOf({ datatype, arraysize }: VotableField): Shape {
  const parts = (arraysize ?? '1').split('x')
  const last = parts[parts.length - 1].trim()
  const isVariable = last.endsWith('*')
  const fixed = isVariable ? parts.slice(0, -1) : parts
  const count = fixed.reduce((product, part) => product * Number.parseInt(part, 10), 1)
  return { datatype, count, isVariable, isScalar: !isVariable && count === 1 }
}

function joined(a: Uint8Array, b: Uint8Array): Uint8Array {
  const all = new Uint8Array(a.length + b.length)
  all.set(a)
  all.set(b, a.length)
  return all
}

/** Fixed-length text is filled up with null bytes. */
function untilNull(text: string): string {
  const end = text.indexOf('\0')
  return end < 0 ? text : text.slice(0, end)
}

function isComplex(datatype: string): boolean {
  return datatype === 'floatComplex' || datatype === 'doubleComplex'
}

function numberAt(view: DataView, at: number, datatype: string): number {
  switch (datatype) {
    case 'short':
      return view.getInt16(at)
    case 'int':
      return view.getInt32(at)
    case 'float':
    case 'floatComplex':
      return view.getFloat32(at)
    case 'double':
    case 'doubleComplex':
      return view.getFloat64(at)
    default:
      return view.getUint8(at)
  }
}

/** The values of an array as TABLEDATA would have them. */
function listText(view: DataView, begin: number, end: number, { datatype, count }: Shape): string {
  const values: string[] = []
  if (datatype === 'bit') {
    for (let bit = 0; bit < Math.min(count, 8 * (end - begin)); bit++) {
      values.push((view.getUint8(begin + (bit >> 3)) >> (7 - (bit & 7))) & 1 ? '1' : '0')
    }
    return values.join(' ')
  }
  const size = isComplex(datatype) ? SIZES[datatype] / 2 : SIZES[datatype]
  for (let at = begin; at < end; at += size) {
    if (datatype === 'long') values.push(view.getBigInt64(at).toString())
    else if (datatype === 'boolean') values.push(String.fromCharCode(view.getUint8(at)))
    else values.push(String(numberAt(view, at, datatype)))
  }
  return values.join(' ')
}
