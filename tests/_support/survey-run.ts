import { readFileSync } from 'node:fs'
import { startTestServer, type TestServer } from '../e2e/_server'
import type { SurveyFile } from './survey-files'
import { seedSite, signInCookie, SLUG } from './survey-site'

/** So many are sent at once; a browser does the same. */
const AT_ONCE = 4
const RETRY_MS = 100

export interface RunSummary {
  files: number
  stored: number
  imaged: number
  working: boolean
  batches: { id: number }[]
}

/** The real server with a campaign, sent to over HTTP and killed at will; what is sent is sent again until it is acknowledged. */
export class SurveyRun {
  #server!: TestServer
  #cookie = ''
  acknowledged = 0
  kills = 0
  starting: Promise<void> | null = null

  constructor(readonly dataFolder: string) {}

  async begin(): Promise<void> {
    await seedSite(this.dataFolder)
    this.#server = await startTestServer(this.dataFolder)
    this.#cookie = await signInCookie(this.#server.url)
  }

  /** Where the server listens now. */
  get url(): string {
    return this.#server.url
  }

  get residentBytes(): number {
    try {
      const status = readFileSync(`/proc/${this.#server.pid}/status`, 'utf8')
      return Number(/VmRSS:\s+(\d+) kB/.exec(status)?.[1] ?? 0) * 1024
    } catch {
      return 0
    }
  }

  request(path: string, init: RequestInit = {}): Promise<Response> {
    return fetch(`${this.#server.url}${path}`, { ...init, headers: { cookie: this.#cookie, ...init.headers } })
  }

  /** SIGKILL, in the middle of whatever it does, and a new server on the same data folder. */
  async kill(): Promise<void> {
    this.kills++
    await this.#server.kill()
    this.starting = startTestServer(this.dataFolder).then((server) => void (this.#server = server))
    await this.starting
    this.starting = null
  }

  /** Sends files in their order, each again until the server has acknowledged it. */
  async send(files: readonly SurveyFile[], onAcknowledged: () => void = () => {}): Promise<void> {
    let next = 0
    const lane = async () => {
      for (let file = files[next++]; file; file = files[next++]) {
        await this.#sendOne(file)
        this.acknowledged++
        onAcknowledged()
      }
    }
    await Promise.all(Array.from({ length: AT_ONCE }, lane))
  }

  async #sendOne(file: SurveyFile): Promise<void> {
    const body = Buffer.from(file.bytes())
    for (;;) {
      const response = await this.request(`/api/campaigns/${SLUG}/files/${file.name}`, { method: 'PUT', body }).catch(
        () => null,
      )
      if (response?.ok) return void (await response.arrayBuffer().catch(() => null))
      if (response && response.status < 500)
        throw new Error(`${file.name}: ${response.status} ${await response.text()}`)
      await new Promise((resolve) => setTimeout(resolve, RETRY_MS))
    }
  }

  async summary(): Promise<RunSummary | null> {
    const response = await this.request(`/api/campaigns/${SLUG}/files?limit=1`).catch(() => null)
    const body = (await response?.json().catch(() => null)) as { summary?: RunSummary } | null
    return body?.summary ?? null
  }

  /** Until nothing is left to be read. */
  async settle(onLook: (summary: RunSummary) => Promise<void> | void = () => {}): Promise<void> {
    for (;;) {
      const summary = await this.summary()
      if (summary) {
        if (!summary.working && summary.stored === 0) return
        await onLook(summary)
      }
      await new Promise((resolve) => setTimeout(resolve, 250))
    }
  }

  async end(): Promise<void> {
    await this.starting
    await this.#server.stop()
  }
}
