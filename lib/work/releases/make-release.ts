import 'server-only'
import { type Readable } from 'node:stream'
import type { Kysely } from 'kysely'
import { findReleaseBefore } from '@/db/queries/release-changes'
import { insertReleaseFile } from '@/db/queries/release-making'
import { ARCHIVE, findReleaseById, listReleaseFiles, type ReleaseRow } from '@/db/queries/releases'
import type { DB } from '@/db/schema'
import type { ReleaseFile } from '@/db/schema/releases'
import { fromJson } from '@/db/schema/values'
import type { BlobStore } from '@/lib/platform/storage/blob-store'
import { changesInWords, type Change } from './changes'
import { keepStamps } from './keep-stamps'
import { makeEntries } from './make-entries'
import { readFrozen } from './read-frozen'
import { releaseAddress } from './release-address'
import { ARCHIVE_TYPE, CHECKSUMS, RELEASE_FILES, STAMPS } from './release-files'
import { changesSince, entriesOf, textOf, type Surroundings } from './write-files'
import { zipOf, type ZipMember } from './zip-files'

export interface ReleaseTools {
  db: Kysely<DB>
  blobs: BlobStore
  stampFolder: string
  siteUrl: string
}

type Progress = (done: number, total: number) => Promise<void>

/**
 * Makes what a release still lacks: its entries, then file by file, the archive last. What is there is never made again, so a process
 * that was killed is followed by one that goes on; each file is whole or not there at all.
 */
export async function makeRelease(tools: ReleaseTools, releaseId: number, progress: Progress): Promise<void> {
  const { db } = tools
  const release = await findReleaseById(db, releaseId)
  if (!release || release.made === 1 || release.givenUpReason !== null) return
  const total = release.entries + RELEASE_FILES.length + 3
  const frozen = await readFrozen(db, release)
  await keepStamps(tools, release, () => progress(1, total))
  await makeEntries(
    db,
    frozen,
    (sha256) => tools.blobs.has(sha256),
    (entries) => progress(entries, total),
  )
  const files = new FileKeeper(tools, release, async (made) => progress(release.entries + made, total))
  await files.open()
  const stamps = await files.keep(STAMPS.name, STAMPS.mediaType, () => zipOf(stampMembers(tools, release)))
  const surroundings = await surroundingsOf(tools, frozen, stamps)
  for (const { name, mediaType } of RELEASE_FILES) {
    await files.keep(name, mediaType, () => encoded(textOf(db, name, surroundings)))
  }
  const listed = files.inOrder(RELEASE_FILES.map(({ name }) => name))
  const sums = listed.map(({ name, sha256 }) => `${sha256}  ${name}\n`).join('')
  await files.keep(CHECKSUMS.name, CHECKSUMS.mediaType, () => encoded([sums]))
  const members = files.inOrder([...RELEASE_FILES.map(({ name }) => name), CHECKSUMS.name])
  await files.keep(ARCHIVE, ARCHIVE_TYPE, () =>
    zipOf(members.map(({ name, sha256 }) => ({ name, compress: true, open: () => tools.blobs.stream(sha256) }))),
  )
}

/** Puts files into the blob store and their rows beside them, once each. */
class FileKeeper {
  readonly #files = new Map<string, ReleaseFile>()
  constructor(
    private readonly tools: ReleaseTools,
    private readonly release: ReleaseRow,
    private readonly told: (made: number) => Promise<void>,
  ) {}

  async open(): Promise<void> {
    for (const file of await listReleaseFiles(this.tools.db, this.release.id)) this.#files.set(file.name, file)
  }

  async keep(name: string, mediaType: string, bytes: () => AsyncIterable<Uint8Array>): Promise<ReleaseFile> {
    const known = this.#files.get(name)
    if (known && (await this.tools.blobs.has(known.sha256))) return known
    const blob = await this.tools.blobs.putStream(bytes())
    const file = { release_id: this.release.id, name, media_type: mediaType, ...blob }
    if (known && known.sha256 !== blob.sha256) {
      throw new Error(
        `${name} of release ${this.release.number} was lost and does not come out the same when made again.`,
      )
    }
    if (!known) await insertReleaseFile(this.tools.db, file)
    this.#files.set(name, file)
    await this.told(this.#files.size)
    return file
  }

  inOrder(names: readonly string[]): ReleaseFile[] {
    return names.map((name) => this.#files.get(name)!)
  }
}

async function* encoded(pieces: AsyncIterable<string> | Iterable<string>): AsyncGenerator<Uint8Array, void, void> {
  const encoder = new TextEncoder()
  for await (const piece of pieces) yield encoder.encode(piece)
}

/** `<entry key>/<view>.png`; a band's view `band:g` is `band-g`, since a colon is no name on every system. */
async function* stampMembers({ db, blobs }: ReleaseTools, release: ReleaseRow): AsyncGenerator<ZipMember, void, void> {
  for await (const entry of entriesOf(db, release.id)) {
    for (const [view, sha256] of Object.entries(fromJson(entry.stamps))) {
      const name = `${entry.entry_key}/${view.replaceAll(/[^A-Za-z0-9._-]/g, '-')}.png`
      yield { name, compress: false, open: (): Readable => blobs.stream(sha256) }
    }
  }
}

async function surroundingsOf(
  { db, siteUrl }: ReleaseTools,
  frozen: Surroundings['frozen'],
  stamps: ReleaseFile,
): Promise<Surroundings> {
  const { release } = frozen
  const before = await findReleaseBefore(db, release.campaign_id, release.number)
  const corrected = release.corrects_id === null ? null : await findReleaseById(db, release.corrects_id)
  const counts = new Map<Change['change'], number>()
  for await (const { change } of changesSince(db, release, before)) counts.set(change, (counts.get(change) ?? 0) + 1)
  const address = (number: number) => releaseAddress(siteUrl, release.slug, number)
  return {
    frozen,
    before,
    corrected: corrected && { number: corrected.number, address: address(corrected.number) },
    address: address(release.number),
    changes: release.kind === 'retraction' ? '' : changesInWords(counts, before?.number ?? null),
    stampsSha256: stamps.sha256,
  }
}
