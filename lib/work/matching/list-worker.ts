/**
 * Reads lists of known objects in a thread beside the server: bundled to dist-workers/list-worker.mjs (npm run workers), so nothing
 * here may touch the database, the settings or Next.
 */
import { once } from 'node:events'
import { setPriority } from 'node:os'
import { isMainThread, type MessagePort } from 'node:worker_threads'
import type { ListMapping } from '@/db/schema/matching'
import { ListFileError } from './list-file'
import { lookAtList, readList, type ListLook, type ListRead, type ListTask } from './read-list'

// Requests go before reading; see lib/work/stamps/image-worker.ts.
if (!isMainThread && process.platform === 'linux') setPriority(10)

export interface LookTask {
  path: string
  bytes: number
  mapping: ListMapping | null
}

/** A class does not cross between threads: a file that is no list comes as its sentence. */
export async function look({ path, bytes, mapping }: LookTask): Promise<ListLook | { fault: string }> {
  try {
    return await lookAtList(path, bytes, mapping)
  } catch (error) {
    if (error instanceof ListFileError) return { fault: error.message }
    throw error
  }
}

/** Sends each part and waits until it has been kept, so that parts never pile up. */
export async function read({ port, ...task }: ListTask & { port: MessagePort }): Promise<ListRead> {
  try {
    return await readList(task, async (part) => {
      port.postMessage(part)
      await once(port, 'message')
    })
  } catch (error) {
    if (error instanceof ListFileError) return { refused: [{ sentence: error.message, stops: true }] }
    throw error
  } finally {
    port.close()
  }
}
