/** A whole table as CSV, streamed: a header line of column names, then one record a row, in chunks of some tens of kB. */
import type { Column } from '@/lib/science/formats/columns'
import { csvLine } from '@/lib/science/formats/csv'
import { inChunks } from '@/lib/science/formats/chunks'

/**
 * Encode the chunks as UTF-8. Memory does not grow with the number of rows.
 * Units, UCDs and descriptions have no place in CSV; the VOTable carries them.
 */
export function csvDocument<Row>(
  columns: readonly Column<Row>[],
  rows: AsyncIterable<Row> | Iterable<Row>,
): AsyncGenerator<string> {
  return inChunks(csvRecords(columns, rows))
}

async function* csvRecords<Row>(
  columns: readonly Column<Row>[],
  rows: AsyncIterable<Row> | Iterable<Row>,
): AsyncGenerator<string> {
  yield csvLine(columns.map((column) => column.name))
  for await (const row of rows) yield csvLine(columns.map((column) => column.value(row)))
}
