import { readVotable } from '@/lib/science/formats/read-votable'
import { replaceIllegal } from '@/lib/science/formats/xml-text'
import type { Difference, Row } from './compare-entry'
import { NotARelease, type ReleaseZip } from './read-release-zip'

type Values = Record<string, unknown>
type Rows = AsyncIterable<Row>

/**
 * What the copies of the catalogue as VOTable and JSON say otherwise than `catalogue.csv`, row by row and column by column. A VOTable is
 * held as its values while it is looked at.
 */
export async function compareCopies(zip: ReleaseZip, catalogue: () => Rows): Promise<Difference[]> {
  const differences: Difference[] = []
  for (const file of ['catalogue.vot', 'catalogue-binary2.vot']) {
    differences.push(...(await compare(file, votableRows(zip, file), catalogue(), replaceIllegal)))
  }
  differences.push(...(await compare('catalogue.json', jsonRows(zip), catalogue(), (text) => text)))
  return differences
}

async function compare(
  file: string,
  copy: AsyncIterableIterator<Values>,
  catalogue: Rows,
  asHeld: (text: string) => string,
): Promise<Difference[]> {
  const differences: Difference[] = []
  const lacking = (candidate: string, released: string, recomputed: string) =>
    differences.push({ candidate, what: `the row of ${file}`, released, recomputed })
  for await (const row of catalogue) {
    const next = await copy.next()
    if (next.done) {
      lacking(row.name, 'nothing', 'one as in catalogue.csv')
      continue
    }
    for (const [column, expected] of Object.entries(row)) {
      const value = next.value[column]
      if (isSame(value, expected, asHeld)) continue
      const released = textOf(value) || 'nothing'
      differences.push({
        candidate: row.name,
        what: `${column} in ${file}`,
        released,
        recomputed: expected || 'nothing',
      })
    }
  }
  for await (const { name } of copy) lacking(textOf(name), 'one', 'none, as in catalogue.csv')
  return differences
}

const textOf = (value: unknown): string =>
  typeof value === 'string' ? value : typeof value === 'number' && !Number.isNaN(value) ? String(value) : ''

function isSame(value: unknown, expected: string, asHeld: (text: string) => string): boolean {
  if (typeof value === 'number' && !Number.isNaN(value)) return expected !== '' && Number(expected) === value
  return textOf(value) === asHeld(expected)
}

async function* votableRows(zip: ReleaseZip, file: string): AsyncGenerator<Values, void, void> {
  const { fields, columns, rowCount, isComplete, problems } = await readVotable(zip.bytes(file))
  if (!isComplete || problems.length > 0) {
    throw new NotARelease(`${file} cannot be read: ${problems[0]?.message ?? 'it ends in the middle.'}`)
  }
  for (let row = 0; row < rowCount; row++) {
    yield Object.fromEntries(fields.map(({ name }, column) => [name, columns[column][row]]))
  }
}

/** An entry a line, as it is written. */
async function* jsonRows(zip: ReleaseZip): AsyncGenerator<Values, void, void> {
  let inEntries = false
  for await (const line of linesOf(zip.bytes('catalogue.json'))) {
    if (!inEntries) inEntries = line === ' "entries": ['
    else if (line.startsWith('{')) yield entryOf(line)
  }
}

function entryOf(line: string): Values {
  try {
    return JSON.parse(line.replace(/,$/, '')) as Values
  } catch {
    throw new NotARelease(`catalogue.json has an entry that cannot be read: ${line.slice(0, 80)}`)
  }
}

async function* linesOf(pieces: AsyncIterable<Uint8Array>): AsyncGenerator<string, void, void> {
  const decoder = new TextDecoder()
  let rest = ''
  for await (const piece of pieces) {
    const lines = (rest + decoder.decode(piece, { stream: true })).split('\n')
    rest = lines.pop() ?? ''
    yield* lines
  }
  yield rest + decoder.decode()
}
