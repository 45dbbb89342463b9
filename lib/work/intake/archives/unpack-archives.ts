import 'server-only'
import type { Kysely } from 'kysely'
import { findWaitingArchive, isStillWaiting, listMemberNames } from '@/db/queries/batches'
import { replaceFileProblems, type NewFileProblem } from '@/db/queries/file-problems'
import { releaseDuplicates, setFileFates } from '@/db/queries/intake'
import type { DB } from '@/db/schema'
import type { FileRow } from '@/db/schema/intake'
import { isoTime } from '@/lib/platform/clock'
import type { BlobStore, StoredBlob } from '@/lib/platform/storage/blob-store'
import { keepFile } from '../keep-file'
import { LOST, type Refusal } from '../refusals'
import type { ArchiveLimits } from './archive-limits'
import { memberName, type ArchiveMember, type ArchiveReader } from './archive-member'
import { openArchive } from './open-archive'

/** Members a transaction: fewer pay more for the commit's sync, more keep requests waiting longer. */
const MEMBERS_PER_COMMIT = 32
const PROBLEMS_TOLD = 3
const MOST_PROBLEMS = 10_000

export interface UnpackTools {
  db: Kysely<DB>
  blobs: BlobStore
  limits: ArchiveLimits
}

type Progress = (done: number, total: number) => Promise<void>

/**
 * Unpacks every waiting archive of a campaign, one after the other, member by member into blobs and rows, named after the
 * archive: `night1.zip/SWS1_g.fits`. After a kill it goes on behind the members that have rows.
 */
export async function unpackArchives(tools: UnpackTools, campaignId: number, progress: Progress): Promise<void> {
  for (let before = 0; ;) {
    const archive = await findWaitingArchive(tools.db, campaignId)
    if (!archive) return
    if (archive.id === before) throw new Error(`Archive ${archive.id} was unpacked and got no fate`)
    before = archive.id
    await new Unpacking(tools, archive, progress).run()
  }
}

class Unpacking {
  readonly #problems: NewFileProblem[] = []
  readonly #ready: { name: string; blob: StoredBlob }[] = []
  readonly #names = new Set<string>()
  #known = new Set<string>()
  #taken = 0
  #hidden = 0
  #isDamaged = false
  constructor(
    private readonly tools: UnpackTools,
    private readonly archive: FileRow,
    private readonly progress: Progress,
  ) {}

  async run(): Promise<void> {
    const { db, blobs, limits } = this.tools
    const { id, name, sha256, bytes } = this.archive
    if (!(await blobs.has(sha256))) return this.#refuse(LOST)
    const opened = await openArchive(blobs.pathOf(sha256), name, bytes, limits)
    if ('refusal' in opened) return this.#refuse(opened.refusal)
    this.#known = await listMemberNames(db, id)
    if (await this.#takeAll(opened.reader, opened.members)) await this.#finish()
  }

  /** False when the archive was cancelled, replaced or paused meanwhile. */
  async #takeAll(reader: ArchiveReader, total: number): Promise<boolean> {
    let seen = 0
    for await (const member of reader.members()) {
      if ('lost' in member) {
        this.#isDamaged = true
        this.#tell(member.lost)
      } else await this.#take(member)
      seen++
      if (this.#ready.length >= MEMBERS_PER_COMMIT || seen % 500 === 0) {
        await this.#commit()
        await this.progress(Math.min(seen, total), total)
        if (!(await isStillWaiting(this.tools.db, this.archive.id))) return false
      }
    }
    await this.#commit()
    return isStillWaiting(this.tools.db, this.archive.id)
  }

  async #take(member: ArchiveMember): Promise<void> {
    const named = memberName(this.archive.name, member.name)
    if (named === 'hidden') this.#hidden++
    else if ('problem' in named) this.#tell(named.problem)
    else if (this.#names.has(named.name)) {
      this.#tell(`The archive holds '${member.name}' twice; only the first is taken.`)
    } else {
      this.#names.add(named.name)
      if (this.#known.has(named.name)) this.#taken++
      else await this.#store(member, named.name)
    }
  }

  async #store(member: ArchiveMember, name: string): Promise<void> {
    const { mostMemberBytes } = this.tools.limits
    try {
      const blob = await this.tools.blobs.putStream(member.chunks, (bytes) => {
        if (bytes > mostMemberBytes) {
          throw new RangeError(`it has more than ${Math.round(mostMemberBytes / 1024 / 1024)} MiB`)
        }
      })
      this.#ready.push({ name, blob })
      this.#taken++
    } catch (error) {
      const code = (error as NodeJS.ErrnoException).code ?? ''
      // A full disk is no fault of the archive. The job is tried again.
      if (['ENOSPC', 'EDQUOT', 'EIO', 'EMFILE', 'EACCES'].includes(code)) throw error
      this.#isDamaged = true
      const why = error instanceof Error ? error.message : String(error)
      this.#tell(`'${member.name}' is lost: ${why.replace(/\.$/, '')}.`)
    }
  }

  async #commit(): Promise<void> {
    const files = this.#ready.splice(0)
    if (files.length === 0) return
    const { id, campaign_id, batch_id, created_by } = this.archive
    const batchId = async () => batch_id
    const delivery = { campaignId: campaign_id, personId: created_by, batchId, archiveId: id }
    await this.tools.db.transaction().execute(async (transaction) => {
      for (const { name, blob } of files) await keepFile(transaction, delivery, name, blob)
    })
  }

  #tell(sentence: string): void {
    if (this.#problems.length < MOST_PROBLEMS) this.#problems.push({ line: null, sentence })
  }

  async #finish(): Promise<void> {
    const taken = `${this.#taken.toLocaleString('en')} ${this.#taken === 1 ? 'file' : 'files'} taken out of it`
    const hidden = this.#hidden > 0 ? `, ${this.#hidden} hidden ones left out` : ''
    const told = this.#problems.slice(0, PROBLEMS_TOLD).map(({ sentence }) => sentence)
    const more = this.#problems.length - told.length
    const reason = [`${taken}${hidden}.`, ...told, ...(more > 0 ? [`And ${more} more problems.`] : [])].join(' ')
    if (this.#taken === 0 && this.#problems.length === 0) {
      const only = this.#hidden > 0 ? 'only hidden ones that operating systems put there' : 'not one'
      return this.#refuse({ fault: 'empty-archive', reason: `The archive should hold files, and holds ${only}.` })
    }
    const isRefused = this.#isDamaged || this.#taken === 0
    await this.#settle(
      isRefused ? { fate: 'refused', fault: 'damaged-archive', reason } : { fate: 'read', fault: null, reason },
    )
  }

  #refuse(refusal: Refusal): Promise<void> {
    return this.#settle({ fate: 'refused', ...refusal })
  }

  async #settle(to: { fate: 'read' | 'refused'; fault: string | null; reason: string }): Promise<void> {
    const { id } = this.archive
    await this.tools.db.transaction().execute(async (transaction) => {
      const now = isoTime()
      await replaceFileProblems(transaction, id, this.#problems)
      await setFileFates(transaction, [id], { ...to, duplicateOf: null }, now)
      if (to.fate === 'refused') await releaseDuplicates(transaction, [id], now)
    })
  }
}
