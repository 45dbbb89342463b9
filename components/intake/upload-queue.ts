import type { ChosenFile } from './collect-files'
import { fileAddress, type SendFile } from './send-file'

/** Four at once keep a connection busy with small files; a fifth gains nothing on the same server. */
const AT_ONCE = 4
const TELL_EVERY_MS = 100

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
}

const NOTHING: UploadState = {
  total: 0,
  done: 0,
  duplicates: 0,
  bytes: 0,
  bytesSent: 0,
  sending: [],
  failed: [],
  active: false,
}

type Item = Upload & { file: File }

/** Sends files one a request, some at once, and goes on while its page is left for another of the application. */
export class UploadQueue {
  readonly #waiting: Item[] = []
  readonly #sending = new Map<number, Item>()
  readonly #failed = new Map<number, Item>()
  readonly #listeners = new Set<() => void>()
  #nextId = 1
  #counts = { total: 0, done: 0, duplicates: 0, bytes: 0, bytesDone: 0 }
  #state: UploadState = NOTHING
  #timer: ReturnType<typeof setTimeout> | null = null

  constructor(
    private readonly slug: string,
    private readonly send: SendFile,
  ) {}

  readonly subscribe = (listener: () => void): (() => void) => {
    this.#listeners.add(listener)
    return () => void this.#listeners.delete(listener)
  }

  readonly getState = (): UploadState => this.#state

  add(files: readonly ChosenFile[]): void {
    // A new delivery counts from nothing, unless one is still under way.
    if (!this.#state.active && this.#failed.size === 0) {
      this.#counts = { total: 0, done: 0, duplicates: 0, bytes: 0, bytesDone: 0 }
    }
    for (const { name, file } of files) {
      this.#waiting.push({ id: this.#nextId++, name, file, bytes: file.size, sent: 0, fault: null })
      this.#counts.total++
      this.#counts.bytes += file.size
    }
    this.#start()
  }

  retryFailed(): void {
    for (const item of this.#failed.values()) this.#waiting.push({ ...item, sent: 0, fault: null })
    this.#failed.clear()
    this.#start()
  }

  #start(): void {
    while (this.#sending.size < AT_ONCE && this.#waiting.length > 0) {
      const item = this.#waiting.shift()
      if (item) void this.#sendOne(item)
    }
    this.#tell(true)
  }

  async #sendOne(item: Item): Promise<void> {
    this.#sending.set(item.id, item)
    try {
      const { fate } = await this.send(fileAddress(this.slug, item.name), item.file, (bytes) => {
        item.sent = Math.min(bytes, item.bytes)
        this.#tell(false)
      })
      this.#counts.done++
      this.#counts.bytesDone += item.bytes
      if (fate === 'duplicate') this.#counts.duplicates++
    } catch (error) {
      item.fault = error instanceof Error ? error.message : String(error)
      this.#failed.set(item.id, item)
    }
    this.#sending.delete(item.id)
    this.#start()
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
    const { total, done, duplicates, bytes, bytesDone } = this.#counts
    this.#state = {
      total,
      done,
      duplicates,
      bytes,
      bytesSent: bytesDone + sending.reduce((sum, { sent }) => sum + sent, 0),
      sending,
      failed: [...this.#failed.values()].map(plain),
      active: sending.length > 0 || this.#waiting.length > 0,
    }
    for (const listener of this.#listeners) listener()
  }
}
