import 'server-only'
import { existsSync } from 'node:fs'
import path from 'node:path'
import { MessageChannel } from 'node:worker_threads'
import { Piscina } from 'piscina'
import type { LookTask } from './list-worker'
import type { ListLook, ListRead, ListTask } from './read-list'

/** Reads files of lists: in a thread in the server, directly in tests. */
export interface ListReader {
  look(task: LookTask): Promise<ListLook | { fault: string }>
  /** `keep` is given one part after the other, each once the one before is kept. */
  read(task: ListTask, keep: (part: string) => Promise<void>): Promise<ListRead>
}

/** On globalThis because route handlers and instrumentation are bundled apart but share one process. */
const shared = globalThis as typeof globalThis & { ringsideListPool?: Piscina }

function pool(): Piscina {
  if (shared.ringsideListPool) return shared.ringsideListPool
  const filename = path.join(/* turbopackIgnore: true */ process.cwd(), 'dist-workers', 'list-worker.mjs')
  if (!existsSync(filename)) {
    throw new Error(`${filename} is missing. Make it with "npm run workers" and start again.`)
  }
  // One for a long list, one for a look meanwhile; none while nobody reads.
  shared.ringsideListPool = new Piscina({ filename, maxThreads: 2, minThreads: 0, idleTimeout: 10_000 })
  return shared.ringsideListPool
}

export const listReader: ListReader = {
  look: (task) => pool().run(task, { name: 'look' }),
  async read(task, keep) {
    const { port1, port2 } = new MessageChannel()
    const ended = new AbortController()
    const failed = new Promise<never>((_, reject) => {
      port1.on('message', (part: string) => {
        keep(part).then(
          () => port1.postMessage('kept'),
          (error: unknown) => {
            reject(error instanceof Error ? error : new Error(String(error)))
            ended.abort()
          },
        )
      })
    })
    try {
      const run = pool().run({ ...task, port: port2 }, { name: 'read', transferList: [port2], signal: ended.signal })
      return (await Promise.race([run, failed])) as ListRead
    } finally {
      port1.close()
    }
  },
}
