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

/** Matches, and remembers what it has parsed, so that a changed pattern does not read a manifest of 100,000 lines again. */
export function matcher(): (work: MatchWork) => Promise<MatchDone> {
  const tables = new Map<Blob, CsvTable>()
  const parsed = new Map<string, ManifestInHand>()
  const inHand = async (name: string, file: Blob, chosen: ChosenColumns): Promise<ManifestInHand> => {
    const key = `${name}\n${file.size}\n${JSON.stringify(chosen)}`
    const found = parsed.get(key)
    if (found) return found
    const table = tables.get(file) ?? readCsv(new Uint8Array(await file.arrayBuffer()))
    tables.set(file, table)
    const columns = manifestColumns(table.header, chosen)
    const { entries, problems, refusal } = parseManifestTable(table, columns)
    const made = { name, header: table.header, columns, chosen, entries, problems, refusal: refusal?.reason ?? null }
    parsed.set(key, made)
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
