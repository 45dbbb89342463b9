/** Columns of a VOTable that comes in: what its FIELDs say, and where its values go. Source: VOTable 1.4 sections 2 and 4. */

export interface VotableField {
  name: string
  id: string | null
  /** as written, such as 'double' or 'unicodeChar' */
  datatype: string
  arraysize: string | null
  unit: string | null
  ucd: string | null
  utype: string | null
  xtype: string | null
  description: string
  /** system of the COOSYS that the FIELD refers to, such as 'ICRS' or 'FK5' */
  frame: string | null
  /** text or number that stands for a missing value */
  nullValue: string | null
}

/**
 * Numbers as doubles with NaN where missing; booleans; everything else as text with null where missing. Datatype long is text,
 * since a double would change identifiers of more than 15 digits; arrays are their values with blanks between them.
 */
export type VotableColumn = Float64Array | (boolean | null)[] | (string | null)[]

const NUMBERS = new Set(['unsignedByte', 'short', 'int', 'float', 'double'])
export const DATATYPES: ReadonlySet<string> = new Set([
  ...NUMBERS,
  'boolean',
  'bit',
  'char',
  'unicodeChar',
  'long',
  'floatComplex',
  'doubleComplex',
])

/** Takes the values of one column as they come, in the order of the rows. */
export interface ColumnStore {
  /** @returns whether the text is a value of the column; where it is not, the value is missing */
  addText(text: string): boolean
  addNumber(value: number): void
  addMissing(): void
  finish(): VotableColumn
}

export function columnStore(field: VotableField): ColumnStore {
  const isScalar = field.arraysize === null || field.arraysize === '1'
  if (NUMBERS.has(field.datatype) && isScalar) return new NumberStore(field.nullValue)
  if (field.datatype === 'boolean' && isScalar) return new BooleanStore()
  return new TextStore(field.nullValue, field.datatype !== 'char' && field.datatype !== 'unicodeChar')
}

const WORDS: Readonly<Record<string, number>> = {
  nan: Number.NaN,
  inf: Number.POSITIVE_INFINITY,
  '+inf': Number.POSITIVE_INFINITY,
  '-inf': Number.NEGATIVE_INFINITY,
  infinity: Number.POSITIVE_INFINITY,
  '-infinity': Number.NEGATIVE_INFINITY,
}
/** Decimal or, for integers, hexadecimal; Number() alone would take '' and '0b1' for numbers. */
const NUMBER = /^[+-]?(\d+\.?\d*([eE][+-]?\d+)?|\.\d+([eE][+-]?\d+)?|0[xX][0-9a-fA-F]+)$/

class NumberStore implements ColumnStore {
  private values = new Float64Array(1024)
  private count = 0
  private readonly missing: number

  constructor(nullValue: string | null) {
    this.missing = nullValue === null || nullValue.trim() === '' ? Number.NaN : Number(nullValue)
  }

  addText(text: string): boolean {
    const trimmed = text.trim()
    if (trimmed === '') {
      this.push(Number.NaN)
      return true
    }
    if (NUMBER.test(trimmed)) {
      this.addNumber(Number(trimmed))
      return true
    }
    const word: number | undefined = WORDS[trimmed.toLowerCase()]
    this.push(word ?? Number.NaN)
    return word !== undefined
  }

  addNumber(value: number): void {
    this.push(value === this.missing ? Number.NaN : value)
  }

  addMissing(): void {
    this.push(Number.NaN)
  }

  private push(value: number): void {
    if (this.count === this.values.length) {
      const larger = new Float64Array(2 * this.count)
      larger.set(this.values)
      this.values = larger
    }
    this.values[this.count++] = value
  }

  finish(): Float64Array {
    return this.values.slice(0, this.count)
  }
}

/** VOTable 1.4 section 6: T, t, 1, true and F, f, 0, false; ? and blank are missing. */
const BOOLEANS: Readonly<Record<string, boolean | null>> = {
  t: true,
  '1': true,
  true: true,
  f: false,
  '0': false,
  false: false,
  '?': null,
  '': null,
  '\0': null,
}

class BooleanStore implements ColumnStore {
  private readonly values: (boolean | null)[] = []

  addText(text: string): boolean {
    const value: boolean | null | undefined = BOOLEANS[text.trim().toLowerCase()]
    this.values.push(value ?? null)
    return value !== undefined
  }

  addNumber(value: number): void {
    this.values.push(BOOLEANS[String.fromCharCode(value).trim().toLowerCase()] ?? null)
  }

  addMissing(): void {
    this.values.push(null)
  }

  finish(): (boolean | null)[] {
    return this.values
  }
}

class TextStore implements ColumnStore {
  private readonly values: (string | null)[] = []

  constructor(
    private readonly nullValue: string | null,
    private readonly isOfNumbers: boolean,
  ) {}

  addText(text: string): boolean {
    const value = this.isOfNumbers ? text.trim() : text
    this.values.push(value === '' || value === this.nullValue ? null : value)
    return true
  }

  addNumber(value: number): void {
    this.addText(String(value))
  }

  addMissing(): void {
    this.values.push(null)
  }

  finish(): (string | null)[] {
    return this.values
  }
}
