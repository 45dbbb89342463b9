import type { ManifestRow } from '@/db/schema/intake'
import type { FileFate } from '@/db/schema/intake'
import { baseName, kindOfName, type FileKind } from './file-name'
import { groupBy } from './group-by'
import type { LookedUp } from './look-up-files'
import type { ChosenColumns, ManifestHeaders } from './manifest-columns'
import { manifestFacts } from './manifest-facts'
import { matchName } from './match-name'
import { nameMatcher } from './name-pattern'
import type { ManifestEntry } from './parse-manifest'
import type { Truth } from './told-truth'

/** What a dropped file will become, as far as names, manifests and the server's answer tell before it is sent. */
export interface PreviewRow {
  name: string
  kind: FileKind | 'line'
  candidate: string | null
  band: string | null
  raDeg: number | null
  decDeg: number | null
  /** Set where it becomes a calibration stamp. */
  truth: Truth | null
  /** Will be refused, or will not do what it seems to. */
  problem: string | null
  note: string | null
}

export interface ManifestInHand {
  name: string
  header: string[]
  columns: ManifestHeaders
  chosen: ChosenColumns
  entries: ManifestEntry[]
  problems: string[]
  refusal: string | null
}

export interface Preview {
  /** Those with a problem first. */
  rows: PreviewRow[]
  candidates: number
  /** Calibration stamps among them. */
  stamps: number
  problems: number
}

export interface PreviewInput {
  /** `fault`: what is wrong with a file as its first bytes show. */
  files: { name: string; bytes: number; fault?: string }[]
  manifests: ManifestInHand[]
  pattern: string
  bands: string[]
  here: LookedUp | null
}

const IN_WORDS: Partial<Record<FileFate, string>> = { refused: 'refused', stored: 'waiting to be read' }

/** Matches as the server will: the dropped manifests, those that are there, the pattern; what none tells is left to headers. */
export function previewMatches({ files, manifests, pattern, bands, here }: PreviewInput): Preview {
  const matcher = nameMatcher(pattern, bands)
  const lines = manifests.flatMap(({ entries, name }) => entries.map((entry) => ({ entry, manifest: name })))
  const rowsOfLines = lines.map(({ entry }, index) => asRow(entry, index + 1))
  const byBase = groupBy(
    rowsOfLines.filter(({ file_base }) => file_base !== null),
    (row) => (row.file_base ?? '').toLowerCase(),
  )
  const byCandidate = groupBy(
    rowsOfLines.filter((row) => row.candidate !== null),
    (row) => row.candidate ?? '',
  )
  const used = new Set<number>()
  const holders = new Map<string, string>()
  const rows: PreviewRow[] = []
  const candidates = new Set<string>()
  const stamps = new Set<string>()
  for (const [index, { name, bytes, fault }] of files.entries()) {
    const kind = kindOfName(name)
    const known = here?.files[index] ?? null
    const row: PreviewRow = {
      name,
      kind,
      candidate: null,
      band: null,
      raDeg: null,
      decDeg: null,
      truth: null,
      problem: null,
      note: null,
    }
    rows.push(row)
    if (bytes === 0) row.problem = 'It is empty.'
    if (known) {
      const same = known.bytes === bytes
      row.note = same
        ? `Under this name is a file of this size here${IN_WORDS[known.fate] ? `, ${IN_WORDS[known.fate]}` : ''}: it is sent only where its bytes differ.`
        : 'Takes the place of the file of this name.'
    }
    if (kind === 'archive') row.note = 'Opened on the server; what is in it is matched there.'
    if (kind === 'manifest') {
      const manifest = manifests.find((one) => one.name === name)
      row.problem = manifest?.refusal ?? row.problem
      const faults = manifest?.problems.length ?? 0
      if (faults > 0) row.note = `Of its lines, ${faults === 1 ? 'one has a problem' : `${faults} have problems`}.`
    }
    if (kind !== 'fits') continue
    row.problem ??= fault ?? null
    const match = matchName(name, matcher, byBase.get(baseName(name).toLowerCase()) ?? [], bands)
    for (const { id } of match.rows) used.add(id)
    const told = match.rows.length === 0 ? (here?.told[index] ?? null) : null
    row.candidate = told?.candidate ?? match.candidate
    row.band = told?.band ?? match.band
    const ofCandidate = byCandidate.get(row.candidate ?? '') ?? []
    for (const line of ofCandidate) if (line.file_base === null) used.add(line.id)
    const facts = manifestFacts([...match.rows, ...ofCandidate])
    row.raDeg = facts.raDeg ?? told?.raDeg ?? null
    row.decDeg = facts.decDeg ?? told?.decDeg ?? null
    row.truth = facts.truth ?? told?.truth ?? null
    row.problem ??= match.refusal?.reason ?? null
    if (row.candidate === null)
      row.note ??= `Its name does not fit ${matcher.pattern}: its header must tell the candidate.`
    else candidates.add(row.candidate)
    if (row.candidate !== null && row.truth !== null) stamps.add(row.candidate)
    if (row.candidate !== null && row.band !== null) {
      const place = `${row.candidate}\n${row.band}`
      const holder = holders.get(place)
      if (holder === undefined) holders.set(place, name)
      else
        row.problem ??= `Band ${row.band} of ${row.candidate} comes from '${holder}' already; only one of them is taken.`
    }
  }
  for (const [index, { entry, manifest }] of lines.entries()) {
    if (used.has(index + 1)) continue
    rows.push({
      name: `${manifest}, line ${entry.line}`,
      kind: 'line',
      candidate: entry.candidate,
      band: entry.band,
      raDeg: entry.raDeg,
      decDeg: entry.decDeg,
      truth: entry.truth,
      problem: null,
      note: entry.fileName === null ? null : `Names '${entry.fileName}', which is not among these files.`,
    })
  }
  for (const { name, problems } of manifests) {
    for (const problem of problems) {
      rows.push({
        name,
        kind: 'line',
        candidate: null,
        band: null,
        raDeg: null,
        decDeg: null,
        truth: null,
        problem,
        note: null,
      })
    }
  }
  const faulty = rows.filter(({ problem }) => problem !== null)
  const sound = rows.filter(({ problem }) => problem === null)
  return { rows: [...faulty, ...sound], candidates: candidates.size, stamps: stamps.size, problems: faulty.length }
}

const asRow = (entry: ManifestEntry, id: number): ManifestRow => ({
  id,
  campaign_id: 0,
  file_id: 0,
  line: entry.line,
  file_name: entry.fileName,
  file_base: entry.fileBase,
  candidate: entry.candidate,
  band: entry.band,
  ra_deg: entry.raDeg,
  dec_deg: entry.decDeg,
  pixel_scale_arcsec: entry.pixelScaleArcsec,
  score: entry.score,
  lens_redshift: entry.lensRedshift,
  source_redshift: entry.sourceRedshift,
  truth: entry.truth,
  explanation: entry.explanation,
})
