import 'server-only'
import { countWaitingFiles, listWaitingFiles, newestDelivery } from '@/db/queries/intake'
import { listReadable } from '@/db/queries/known-files'
import { isoTime } from '@/lib/platform/clock'
import { groupBy } from '@/lib/work/intake/group-by'
import { keepManifest } from '@/lib/work/intake/read-manifest'
import { campaignWork, type CampaignWork, type ImagingTools } from './campaign-work'
import { joinRefused } from './join-refused'
import { inLanes } from './in-lanes'
import { matchByHeader, matchPage, type UnmatchedFile } from './match-waiting'
import { planImaging } from './plan-imaging'
import { runImaging } from './run-imaging'
import { WaitingCandidates, type MatchedFile } from './waiting-candidates'

const FILES_PER_PAGE = 3000
const LOOK_AGAIN_MS = 250
/** So many candidates are imaged before it is asked again whether their batch goes on. */
const GROUPS_PER_LOOK = 128
/** While the last of one part are drawn and committed, the next keeps the threads at work. */
const PARTS_AT_ONCE = 2
/** A file that shows its bands only when it is opened waits this long at most while more files keep coming. */
const LONGEST_WAIT_MS = 20_000

type Progress = (done: number, total: number) => Promise<void>

/**
 * Reads and images every stored file of a campaign, each file once: files are gathered by candidate, and one call to a worker
 * reads a candidate's files, draws its stamps and answers with rows. Ends when nothing is left to be read. All that it
 * has to remember is the fate of the files, so after a kill it goes on where it was.
 */
export async function readFiles(tools: ImagingTools, campaignId: number, progress: Progress): Promise<void> {
  const reading = new Reading(tools, campaignId, progress)
  // Files can go back to 'stored' behind the pages already seen, so it ends only when a look from the start finds nothing.
  while (await reading.readAll()) reading.startOver()
  await reading.tellAll()
}

class Reading {
  #afterId = 0
  #done = 0
  #reported = 0
  readonly #seen = new Map<number, number>()
  constructor(
    private readonly tools: ImagingTools,
    private readonly campaignId: number,
    private readonly progress: Progress,
  ) {}

  startOver(): void {
    this.#afterId = 0
  }

  /** Returns whether there was anything to read. */
  async readAll(): Promise<boolean> {
    const { db, filesPerPage = FILES_PER_PAGE } = this.tools
    await this.#tell(0)
    let found = await this.#readManifests()
    // Settings are read after manifests and once for this pass: a change asks for another.
    const work = await campaignWork(db, this.campaignId)
    const waiting = new WaitingCandidates(work.bands.length)
    const unmatched: UnmatchedFile[] = []
    for (;;) {
      const files = await listWaitingFiles(db, this.campaignId, 'fits', this.#afterId, filesPerPage)
      if (files.length > 0) {
        found = true
        this.#afterId = files[files.length - 1].id
        await this.#readPage(work, files, waiting, unmatched)
        if (files.length === filesPerPage) continue
      }
      if (waiting.files + unmatched.length === 0) {
        if (files.length === 0) return found
        continue
      }
      if (await this.#isQuiet()) {
        await this.#readRest(work, waiting.takeAll(), unmatched.splice(0))
        continue
      }
      const due = isoTime(-LONGEST_WAIT_MS)
      const old = unmatched.filter(({ file }) => file.created_at < due)
      const untold = waiting.takeUntoldBefore(due)
      if (old.length + untold.length > 0) await this.#readRest(work, untold, unmatched.splice(0, old.length))
      // A manifest that came meanwhile may name the files that wait.
      if (await this.#readManifests()) return true
      if (files.length === 0) await new Promise((resolve) => setTimeout(resolve, LOOK_AGAIN_MS))
    }
  }

  async #readPage(
    work: CampaignWork,
    files: Awaited<ReturnType<typeof listWaitingFiles>>,
    waiting: WaitingCandidates,
    unmatched: UnmatchedFile[],
  ): Promise<void> {
    for (const { id } of files) this.#refuseEndless(id)
    const page = await matchPage(this.tools, work, files)
    unmatched.push(...page.unmatched)
    const complete = page.matched.flatMap(
      (matched) => waiting.add(matched, page.heldBands.get(matched.candidate) ?? 0) ?? [],
    )
    // Together, so that files of one candidate that have changed places do not stand in each other's way.
    const ready = [...groupBy(complete, ({ candidate }) => candidate).values()]
    await this.#tell(page.refused)
    await this.#image(work, ready)
  }

  async #readRest(work: CampaignWork, waiting: MatchedFile[][], unmatched: UnmatchedFile[]): Promise<void> {
    const { matched, refused } = await matchByHeader(this.tools, work, unmatched)
    await this.#tell(refused)
    const groups = groupBy([...waiting.flat(), ...matched], ({ candidate }) => candidate)
    await this.#image(work, [...groups.values()])
  }

  async #image(work: CampaignWork, groups: MatchedFile[][]): Promise<void> {
    const starts = Array.from({ length: Math.ceil(groups.length / GROUPS_PER_LOOK) }, (_, k) => k * GROUPS_PER_LOOK)
    await inLanes(PARTS_AT_ONCE, starts, async (start) => {
      const part = groups.slice(start, start + GROUPS_PER_LOOK)
      // A batch may have been paused or cancelled meanwhile. What is left of a group is found again by the next look.
      const ids = part.flatMap((group) => group.map(({ file }) => file.id))
      const readable = await listReadable(this.tools.db, ids)
      const standing = part.filter((group) => group.every(({ file }) => readable.has(file.id)))
      const planned = await planImaging(this.tools, work, await joinRefused(this.tools, work, standing))
      await runImaging(this.tools, work, planned, (files) => this.#tell(files))
    })
  }

  async #readManifests(): Promise<boolean> {
    const { db, blobs, runner } = this.tools
    const files = await listWaitingFiles(db, this.campaignId, 'manifest', 0, FILES_PER_PAGE)
    for (const file of files) {
      await keepManifest(
        db,
        this.campaignId,
        file,
        await runner.manifest({ path: blobs.pathOf(file.sha256), columns: file.columns }),
      )
      await this.#tell(1)
    }
    return files.length > 0
  }

  async #isQuiet(): Promise<boolean> {
    const newest = await newestDelivery(this.tools.db, this.campaignId)
    return newest === null || Date.now() - Date.parse(newest) >= this.tools.quietMs
  }

  async #tell(settled: number): Promise<void> {
    this.#done += settled
    // Each report is a write: two a second are enough to watch.
    if (Date.now() - this.#reported < 500) return
    await this.tellAll()
  }

  async tellAll(): Promise<void> {
    this.#reported = Date.now()
    // Counted anew: files keep coming while others are read.
    await this.progress(this.#done, this.#done + (await countWaitingFiles(this.tools.db, this.campaignId)))
  }

  /** A file that is never settled would be read for ever. */
  #refuseEndless(id: number): void {
    const times = (this.#seen.get(id) ?? 0) + 1
    this.#seen.set(id, times)
    if (times > 20) throw new Error(`File ${id} has been read ${times} times without getting a fate`)
  }
}
