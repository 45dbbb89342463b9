import type { ChosenFile } from './collect-files'
import { hashFile, type HashFile } from './hash-file'
import { fileAddress, SendFault, type SendFile } from './send-file'

/** Four at once keep a connection busy with small files; a fifth gains nothing on the same server. */
const AT_ONCE = 4
const TELL_EVERY_MS = 100
const TRY_AGAIN_MS = 3000

export interface Upload {
  id: number
  name: string
  bytes: number
  sent: number
  fault: string | null
}

export interface UploadState {
  /** Files of this delivery, done or not. */
  total: number
  done: number
  duplicates: number
  bytes: number
  bytesSent: number
  sending: Upload[]
  failed: Upload[]
  active: boolean
  paused: boolean
  /** The connection is lost; sending is tried again by itself. */
  stalled: boolean
  /** Files that were not sent because sending was cancelled. */
  cancelled: number
}

/** A file to be sent with what is known of it. */
export interface FileToSend extends ChosenFile {
  /** SHA-256 of what the server has under this name: the same bytes are not sent again. */
  known?: string
  /** JSON of the columns chosen for a manifest. */
  columns?: string
}

const NO_COUNTS = { total: 0, done: 0, duplicates: 0, bytes: 0, bytesDone: 0, cancelled: 0 }
const NOTHING: UploadState = {
  total: 0,
  done: 0,
  duplicates: 0,
  bytes: 0,
  bytesSent: 0,
  sending: [],
  failed: [],
  active: false,
  paused: false,
  stalled: false,
  cancelled: 0,
}

type Item = Upload & Omit<FileToSend, 'name'>

/** Sends files one a request, some at once, and goes on while its page is left for another of the application. */
export class UploadQueue {
  #waiting: Item[] = []
  readonly #sending = new Map<number, Item>()
  readonly #failed = new Map<number, Item>()
  readonly #listeners = new Set<() => void>()
  #nextId = 1
  #counts = { ...NO_COUNTS }
  #state: UploadState = NOTHING
  #timer: ReturnType<typeof setTimeout> | null = null
  #paused = false
  #stall: ReturnType<typeof setTimeout> | null = null
  #abort = new AbortController()

  constructor(
    private readonly slug: string,
    private readonly send: SendFile,
    private readonly hash: HashFile = hashFile,
  ) {}

  readonly subscribe = (listener: () => void): (() => void) => {
    this.#listeners.add(listener)
    return () => void this.#listeners.delete(listener)
  }

  readonly getState = (): UploadState => this.#state

  add(files: readonly FileToSend[]): void {
    // A new delivery counts from nothing, unless one is still under way.
    if (!this.#state.active && this.#failed.size === 0) this.#counts = { ...NO_COUNTS }
    for (const file of files) {
      const bytes = file.file.size
      this.#waiting.push({ ...file, id: this.#nextId++, bytes, sent: 0, fault: null })
      this.#counts.total++
      this.#counts.bytes += bytes
    }
    this.#start()
  }

  retryFailed(): void {
    for (const item of this.#failed.values()) this.#waiting.push({ ...item, sent: 0, fault: null })
    this.#failed.clear()
    this.#start()
  }

  /** Files under way are finished, no other is begun. */
  pause(): void {
    this.#paused = true
    this.#publish()
  }

  goOn(): void {
    this.#paused = false
    this.#endStall()
    this.#start()
    this.#publish()
  }

  /** Whatever has not arrived is not sent; what has stays. */
  cancel(): void {
    const dropped = [...this.#waiting, ...this.#sending.values()]
    this.#waiting = []
    this.#counts.cancelled += dropped.length
    this.#paused = false
    this.#endStall()
    this.#abort.abort()
    this.#abort = new AbortController()
    this.#publish()
  }

  #start(): void {
    const free = !this.#paused && this.#stall === null
    while (free && this.#sending.size < AT_ONCE) {
      const item = this.#waiting.shift()
      if (!item) break
      void this.#sendOne(item, this.#abort.signal)
    }
    this.#tell(true)
  }

  async #sendOne(item: Item, signal: AbortSignal): Promise<void> {
    this.#sending.set(item.id, item)
    try {
      const fate = await this.#fateOf(item, signal)
      // What arrived although it was cancelled is done all the same.
      if (signal.aborted) this.#counts.cancelled--
      this.#counts.done++
      this.#counts.bytesDone += item.bytes
      if (fate === 'duplicate') this.#counts.duplicates++
    } catch (error) {
      if (!signal.aborted) this.#keep(item, error)
    }
    this.#sending.delete(item.id)
    this.#start()
  }

  async #fateOf(item: Item, signal: AbortSignal): Promise<string> {
    const { known, file, columns } = item
    if (known !== undefined && (await this.hash(file)) === known) return 'duplicate'
    if (signal.aborted) throw new SendFault('cancelled', 'Sending was cancelled.')
    const onSent = (bytes: number) => {
      item.sent = Math.min(bytes, item.bytes)
      this.#tell(false)
    }
    return (await this.send(fileAddress(this.slug, item.name, columns), file, onSent, signal)).fate
  }

  #keep(item: Item, error: unknown): void {
    if (error instanceof SendFault && error.kind === 'connection') {
      item.sent = 0
      this.#waiting.unshift(item)
      this.#stall ??= setTimeout(() => {
        this.#endStall()
        this.#start()
      }, TRY_AGAIN_MS)
      return
    }
    item.fault = error instanceof Error ? error.message : String(error)
    this.#failed.set(item.id, item)
  }

  #endStall(): void {
    if (this.#stall !== null) clearTimeout(this.#stall)
    this.#stall = null
  }

  /** Thousands of small files would otherwise draw the page thousands of times. */
  #tell(mayEnd: boolean): void {
    const ended = mayEnd && this.#sending.size === 0 && this.#waiting.length === 0
    if (this.#timer !== null && !ended) return
    if (this.#timer !== null) clearTimeout(this.#timer)
    this.#timer = setTimeout(() => this.#publish(), ended ? 0 : TELL_EVERY_MS)
    if (!this.#state.active || ended) this.#publish()
  }

  #publish(): void {
    if (this.#timer !== null) clearTimeout(this.#timer)
    this.#timer = null
    const plain = ({ id, name, bytes, sent, fault }: Item): Upload => ({ id, name, bytes, sent, fault })
    const sending = [...this.#sending.values()].map(plain)
    const { bytesDone, ...counts } = this.#counts
    this.#state = {
      ...counts,
      bytesSent: bytesDone + sending.reduce((sum, { sent }) => sum + sent, 0),
      sending,
      failed: [...this.#failed.values()].map(plain),
      active: sending.length > 0 || this.#waiting.length > 0,
      paused: this.#paused,
      stalled: this.#stall !== null,
    }
    for (const listener of this.#listeners) listener()
  }
}
