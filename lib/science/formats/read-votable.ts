/**
 * Reads a VOTable as people and services save it (versions 1.0 to 1.5), in TABLEDATA, BINARY or BINARY2, piece by piece: memory holds
 * the values, never the document. Source: VOTable 1.4 (https://www.ivoa.net/documents/VOTable/20191021/). XML by the sax package.
 */
import sax from 'sax'
import { BinaryRows } from '@/lib/science/formats/votable-binary-rows'
import {
  columnStore,
  DATATYPES,
  type ColumnStore,
  type VotableColumn,
  type VotableField,
} from '@/lib/science/formats/votable-fields'
import { failureSentence, ProblemList, type VotableProblem } from '@/lib/science/formats/votable-problems'
import { XmlTextDecoder, type TextOrBytes } from '@/lib/science/formats/votable-text'

export interface VotableTable {
  name: string
  description: string
  fields: VotableField[]
  /** one for each field, all with rowCount values */
  columns: VotableColumn[]
  rowCount: number
  /** INFO elements, in order */
  infos: { name: string; value: string }[]
  /** false when the file ends early or is damaged: the rows before are there */
  isComplete: boolean
  /** in the order of the lines, at most about a hundred */
  problems: VotableProblem[]
}

export interface VotableOptions {
  /** which TABLE with columns to read, from 0; the first when left out */
  table?: number
}

const ignore = () => undefined

/** Only the five entities of XML itself: none can be declared, so that none can grow. */
const SAX_OPTIONS = { strictEntities: true, position: true }

/**
 * Never throws on bad content: a row that cannot be trusted is named in `problems` and left out, a cell that is no value of its column
 * is named and missing, and of a file that ends in the middle the rows before are read.
 */
export function readVotable(input: TextOrBytes, options?: VotableOptions): VotableTable
export function readVotable(
  input: AsyncIterable<TextOrBytes> | Iterable<TextOrBytes>,
  options?: VotableOptions,
): Promise<VotableTable>
export function readVotable(
  input: TextOrBytes | AsyncIterable<TextOrBytes> | Iterable<TextOrBytes>,
  options: VotableOptions = {},
): VotableTable | Promise<VotableTable> {
  const reader = new VotableReader(options)
  if (typeof input === 'string' || input instanceof Uint8Array) {
    reader.write(input)
    return reader.finish()
  }
  return (async () => {
    for await (const piece of input) if (!reader.write(piece)) break
    return reader.finish()
  })()
}

type Attributes = Record<string, string>

class VotableReader {
  private readonly parser = sax.parser(true, SAX_OPTIONS)
  private readonly decoder = new XmlTextDecoder()
  private readonly problems = new ProblemList()
  private readonly frames = new Map<string, string>()
  private readonly infos: { name: string; value: string }[] = []
  private readonly path: string[] = []
  private tableNumber = -1
  private isDone = false
  private hasVotable = false
  private hasRows = false
  private isBroken = false
  private text = ''
  private keepsText = false

  private name = ''
  private description = ''
  private refs: (string | null)[] = []
  private fields: VotableField[] = []
  private stores: ColumnStore[] = []
  private cells: string[] = []
  private rowCount = 0
  private rowLine = 0
  private binary: BinaryRows | null = null
  private base64 = ''

  constructor(private readonly options: VotableOptions) {
    this.parser.onopentag = (tag) => this.open(localName(tag.name), tag.attributes as Attributes)
    this.parser.onclosetag = (name) => this.close(localName(name))
    this.parser.ontext = (text) => this.take(text)
    this.parser.oncdata = (text) => this.take(text)
    this.parser.onerror = (error) => this.fail(error)
  }

  /** @returns whether more is wanted */
  write(piece: TextOrBytes): boolean {
    return this.guarded(() => this.parser.write(this.decoder.write(piece)))
  }

  private guarded(step: () => void): boolean {
    if (this.isBroken) return false
    try {
      step()
    } catch (error) {
      this.fail(error)
    }
    return !this.isBroken
  }

  /** The first failure ends the reading; the parser may go on calling for what comes after it in the same piece. */
  private fail(error: unknown): void {
    if (this.isBroken) return
    this.isBroken = true
    this.parser.onopentag = this.parser.onclosetag = this.parser.ontext = this.parser.oncdata = ignore
    this.note(failureSentence(error, this.hasVotable, this.rowCount))
  }

  private note(message: string, line: number | null = this.parser.line + 1): void {
    this.problems.add(message, line)
  }

  private open(name: string, attributes: Attributes): void {
    const parent = this.path[this.path.length - 1]
    this.path.push(name)
    switch (name) {
      case 'VOTABLE':
        this.hasVotable = true
        return
      case 'COOSYS':
        if (attributes.ID)
          this.frames.set(attributes.ID, `${attributes.system ?? ''} ${attributes.equinox ?? ''}`.trim())
        return
      case 'INFO':
        this.openInfo(attributes)
        return
      case 'TABLE':
        this.openTable(attributes)
        return
      case 'FIELD':
        if (this.isWanted() && parent === 'TABLE') this.openField(attributes)
        return
      case 'VALUES':
        if (this.isWanted() && parent === 'FIELD' && attributes.null !== undefined) {
          this.fields[this.fields.length - 1].nullValue = attributes.null
        }
        return
      case 'DESCRIPTION':
        this.keepText(this.isWanted() && (parent === 'TABLE' || parent === 'FIELD'))
        return
      case 'TABLEDATA':
      case 'BINARY':
      case 'BINARY2':
      case 'FITS':
        if (this.isWanted()) this.openData(name)
        return
      case 'STREAM':
        if (this.isWanted() && this.binary) this.openStream(attributes)
        return
      case 'TR':
        this.cells.length = 0
        this.rowLine = this.parser.line + 1
        return
      case 'TD':
        this.keepText(this.hasRows)
    }
  }

  private isWanted(): boolean {
    return !this.isDone && this.tableNumber === (this.options.table ?? 0) && this.path.includes('TABLE')
  }

  private keepText(keeps: boolean): void {
    this.keepsText = keeps
    this.text = ''
  }

  private openInfo({ name = '', value = '' }: Attributes): void {
    this.infos.push({ name, value })
    if (name === 'QUERY_STATUS' && value.toUpperCase() === 'ERROR') {
      this.note(
        'The service that wrote this file reports an error (INFO QUERY_STATUS) in place of a table; look into the file.',
      )
    }
    if (name === 'QUERY_STATUS' && value.toUpperCase() === 'OVERFLOW') {
      this.note(
        'The service that wrote this file cut its answer off at a limit (QUERY_STATUS OVERFLOW): rows are missing.',
      )
    }
  }

  private openTable({ name = '', ref }: Attributes): void {
    if (ref !== undefined) return
    this.tableNumber++
    if (this.isWanted()) this.name = name
  }

  private openField(attributes: Attributes): void {
    const { ID, name, datatype = 'char', arraysize, unit, ucd, utype, xtype, ref } = attributes
    const known = DATATYPES.has(datatype)
    if (!known)
      this.note(
        `The column ${name ?? ID ?? ''} has the datatype '${datatype}', which VOTable does not know; it is read as text.`,
      )
    this.refs.push(ref ?? null)
    this.fields.push({
      name: name ?? ID ?? `column ${this.fields.length + 1}`,
      id: ID ?? null,
      datatype: known ? datatype : 'char',
      arraysize: arraysize ?? null,
      unit: unit?.trim() || null,
      ucd: ucd?.trim() || null,
      utype: utype ?? null,
      xtype: xtype ?? null,
      description: '',
      frame: null,
      nullValue: null,
    })
  }

  private openData(kind: string): void {
    if (kind === 'FITS') {
      this.note('This VOTable keeps its rows in FITS. Save it as TABLEDATA or BINARY2, for instance with stilts tpipe.')
      return
    }
    if (this.fields.length === 0) this.note('The table has rows but no FIELD that says what they are; nothing is read.')
    this.stores = this.fields.map(columnStore)
    this.hasRows = kind === 'TABLEDATA'
    if (kind !== 'TABLEDATA') this.binary = new BinaryRows(this.fields, this.stores, kind === 'BINARY2')
  }

  private openStream({ href, encoding = 'base64' }: Attributes): void {
    if (href !== undefined) {
      this.note(
        `The rows of this table are in another place (${href}), which is not fetched. Save the table with its rows.`,
      )
      this.binary = null
    } else if (encoding !== 'base64') {
      this.note(
        `The rows are encoded as '${encoding}'; only base64 can be read. Save the table as TABLEDATA or BINARY2.`,
      )
      this.binary = null
    } else this.keepText(true)
  }

  private take(text: string): void {
    if (!this.keepsText) return
    if (this.binary === null) this.text += text
    else this.takeBase64(text, false)
  }

  private takeBase64(text: string, isLast: boolean): void {
    const clean = this.base64 + text.replace(/\s+/g, '')
    const whole = isLast ? clean.length : clean.length - (clean.length % 4)
    this.base64 = clean.slice(whole)
    this.binary?.push(Buffer.from(clean.slice(0, whole), 'base64'))
    this.rowCount = this.binary?.rowCount ?? 0
  }

  private close(name: string): void {
    this.path.pop()
    if (name === 'TD') {
      if (this.hasRows) this.cells.push(this.text)
      this.keepsText = false
    } else if (name === 'TR') {
      if (this.hasRows) this.closeRow()
    } else if (name === 'TABLEDATA') this.hasRows = false
    else if (name === 'STREAM' && this.binary) this.closeStream(this.binary)
    else if (name === 'DESCRIPTION' && this.keepsText) {
      const text = this.text.trim()
      if (this.path[this.path.length - 1] === 'FIELD') this.fields[this.fields.length - 1].description = text
      else this.description = text
      this.keepsText = false
    } else if (name === 'TABLE' && this.tableNumber === (this.options.table ?? 0)) this.isDone = true
  }

  private closeRow(): void {
    const { cells, fields } = this
    if (cells.length !== fields.length) {
      const count = `${cells.length} ${cells.length === 1 ? 'cell' : 'cells'} where the table has ${fields.length} columns`
      this.note(`This row has ${count}; it is left out.`, this.rowLine)
      return
    }
    for (let k = 0; k < cells.length; k++) {
      if (this.stores[k].addText(cells[k])) continue
      this.note(
        `'${cells[k].slice(0, 40)}' in the column ${fields[k].name} is not a ${fields[k].datatype}; it is taken as missing.`,
        this.rowLine,
      )
    }
    this.rowCount++
  }

  private closeStream(binary: BinaryRows): void {
    this.takeBase64('', true)
    if (binary.leftOver > 0) {
      this.note(`The binary data end in the middle of a row: the ${binary.rowCount} rows before are read.`)
    }
    this.keepsText = false
    this.binary = null
  }

  finish(): VotableTable {
    this.guarded(() => {
      this.parser.write(this.decoder.end())
      this.parser.close()
    })
    if (!this.isBroken && !this.hasVotable) {
      this.note('This is not a VOTable: the element VOTABLE is missing. Choose another file.', null)
    } else if (!this.isBroken && this.fields.length === 0) {
      this.note('The VOTable holds no table with columns. Choose another file.', null)
    }
    if (this.decoder.isDamaged) {
      this.note(
        'Some characters are none of the encoding that the file declares and were replaced by \ufffd. Save it as UTF-8.',
        null,
      )
    }
    if (this.tableNumber > (this.options.table ?? 0)) {
      const which = this.name ? `'${this.name}'` : `number ${(this.options.table ?? 0) + 1}`
      this.note(`The file holds ${this.tableNumber + 1} tables; ${which} is read.`, null)
    }
    // Without DATA a table has no rows, and its columns are empty.
    const stores = this.stores.length === 0 ? this.fields.map(columnStore) : this.stores
    return {
      name: this.name,
      description: this.description,
      fields: this.fields.map((field, k) => ({ ...field, frame: this.frames.get(this.refs[k] ?? '') ?? null })),
      columns: stores.map((store) => store.finish()),
      rowCount: this.rowCount,
      infos: this.infos,
      isComplete: !this.isBroken,
      problems: this.problems.finish(),
    }
  }
}

/** A prefix of the namespace says nothing here: services disagree on the namespace itself. */
function localName(name: string): string {
  return name.slice(name.indexOf(':') + 1)
}
