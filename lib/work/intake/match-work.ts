import { NamePattern } from '@/lib/work/campaigns/campaign-input'
import { readCsv, type CsvTable } from '@/lib/science/formats/csv'
import type { LookedUp } from './look-up-files'
import { manifestColumns, type ChosenColumns, type ManifestHeaders } from './manifest-columns'
import { parseManifestTable } from './parse-manifest'
import { previewMatches, type ManifestInHand, type Preview, type PreviewInput } from './match-preview'

/** A pattern as it was typed: what it is taken for, null for the default, or the sentence of what is wrong with it. */
export function checkedPattern(typed: string): { pattern: string | null; fault: string | null } {
  const { success, data, error } = NamePattern.safeParse(typed)
  return success
    ? { pattern: data, fault: null }
    : { pattern: null, fault: error.issues[0]?.message ?? 'It is no pattern.' }
}

/** What is asked of the worker each time something is changed; files are references, not their bytes. */
export interface MatchWork {
  files: PreviewInput['files']
  manifests: { name: string; file: Blob }[]
  chosen: Record<string, ChosenColumns>
  pattern: string
  bands: string[]
  here: LookedUp | null
}

export interface MatchDone {
  preview: Preview
  manifests: { name: string; header: string[]; columns: ManifestHeaders }[]
}

/** A manifest as it was read, and as it was last parsed. */
interface Read {
  /** Size and time of the file. */
  version: string
  table: CsvTable
  chosen: string
  inHand: ManifestInHand
}

/**
 * A thread gets another object for the same file with each question, so that files are told apart by name, size and time; null: a
 * Blob that is no File has none of these.
 */
const versionOf = (file: Blob): string | null => (file instanceof File ? `${file.size} ${file.lastModified}` : null)

/**
 * Matches, and remembers what it has read and parsed: a changed column does not read a manifest of 100,000 lines again, a changed
 * pattern does not parse it again.
 */
export function matcher(): (work: MatchWork) => Promise<MatchDone> {
  const known = new Map<string, Read>()
  const inHand = async (name: string, file: Blob, chosenColumns: ChosenColumns): Promise<ManifestInHand> => {
    const version = versionOf(file)
    const chosen = JSON.stringify(chosenColumns)
    const before = known.get(name)
    const same = before !== undefined && before.version === version ? before : null
    if (same?.chosen === chosen) return same.inHand
    const table = same?.table ?? readCsv(new Uint8Array(await file.arrayBuffer()))
    const columns = manifestColumns(table.header, chosenColumns)
    const { entries, problems, refusal } = parseManifestTable(table, columns)
    const made = {
      name,
      header: table.header,
      columns,
      chosen: chosenColumns,
      entries,
      problems,
      refusal: refusal?.reason ?? null,
    }
    if (version !== null) known.set(name, { version, table, chosen, inHand: made })
    return made
  }
  return async ({ manifests, chosen, ...work }) => {
    const read: ManifestInHand[] = []
    for (const { name, file } of manifests) read.push(await inHand(name, file, chosen[name] ?? {}))
    return {
      preview: previewMatches({ ...work, manifests: read }),
      manifests: read.map(({ name, header, columns }) => ({ name, header, columns })),
    }
  }
}
