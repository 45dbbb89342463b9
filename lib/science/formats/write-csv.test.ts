import { describe, expect, it } from 'vitest'
import type { Column } from '@/lib/science/formats/columns'
import { csvDocument } from '@/lib/science/formats/write-csv'

interface Lens {
  name: string
  ra: number | null
}

const columns: Column<Lens>[] = [
  { name: 'name', datatype: 'unicodeChar', description: 'Designation', value: (lens) => lens.name },
  { name: 'ra', datatype: 'double', unit: 'deg', description: 'Right ascension', value: (lens) => lens.ra },
]

async function textOf(rows: Iterable<Lens> | AsyncIterable<Lens>) {
  let text = ''
  for await (const chunk of csvDocument(columns, rows)) text += chunk
  return text
}

describe('csvDocument', () => {
  it('writes a header line and one record a row, empty for null', async () => {
    expect(
      await textOf([
        { name: 'a', ra: 359.99999999999994 },
        { name: 'b, c', ra: null },
      ]),
    ).toBe('name,ra\r\na,359.99999999999994\r\n"b, c",\r\n')
  })

  it('writes the header alone for no rows, from an asynchronous source too', async () => {
    expect(await textOf((async function* () {})())).toBe('name,ra\r\n')
  })

  it('yields chunks of tens of kilobytes and takes rows only as they are wanted', async () => {
    let taken = 0
    function* rows() {
      for (; taken < 100_000; taken++) yield { name: `row ${taken}`, ra: taken / 7 }
    }
    const chunks = csvDocument(columns, rows())
    const first = await chunks.next()
    expect((first.value as string).length).toBeGreaterThan(30_000)
    expect((first.value as string).length).toBeLessThan(40_000)
    expect(taken).toBeLessThan(2_000)
    await chunks.return(undefined)
    expect(taken).toBeLessThan(2_000)
  })

  it('passes on the error of its source, so that nobody takes half a table for a whole one', async () => {
    async function* rows() {
      yield { name: 'a', ra: 1 }
      throw new Error('the database went away')
    }
    await expect(textOf(rows())).rejects.toThrow('the database went away')
  })
})
