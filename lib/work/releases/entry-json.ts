import type { CellValue } from '@/lib/science/formats/columns'
import type { EntryPage, ReleaseHead } from './read-release-page'
import { RELEASE_COLUMNS } from './release-columns'

/** An entry for programs: by the names of the columns that the catalogue's files have. */
export function entryJson(
  head: ReleaseHead,
  { row, entry }: EntryPage,
  addresses: { entry: string; release: string; stamp: (sha256: string) => string },
) {
  const values: Record<string, CellValue> = {}
  for (const column of RELEASE_COLUMNS) values[column.name] = column.value(row)
  return {
    address: addresses.entry,
    cautions: head.cautions,
    release: {
      number: head.number,
      title: head.title,
      address: addresses.release,
      howToCite: head.howToCite,
      licence: head.licence.id ?? head.licence.name,
      notices: head.notices,
    },
    entry: values,
    knownAs: entry.knownAs,
    stamps: entry.stamps.map(({ view, sha256 }) => ({ view, sha256, address: addresses.stamp(sha256) })),
  }
}
