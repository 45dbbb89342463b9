/** The least that pictures can cost: encoding them and nothing else, on as many processors as imaging has. */
import { availableParallelism } from 'node:os'
import { Worker } from 'node:worker_threads'
import { buildSync } from 'esbuild'
import sharp from 'sharp'

export interface Picture {
  pixels: Uint8Array
  width: number
  height: number
  channels: 1 | 3
}

/** sharp's encoder in libuv's and its own threads, level 2 without filters: of its settings the fastest that is not larger. */
export async function floorOfSharp(pictures: readonly Picture[]): Promise<number> {
  const started = performance.now()
  let next = 0
  const lane = async () => {
    for (let picture = pictures[next++]; picture; picture = pictures[next++]) {
      const { pixels, width, height, channels } = picture
      const image = sharp(pixels, { raw: { width, height, channels } })
      const grey = channels === 1 ? image.toColourspace('b-w') : image
      await grey.png({ compressionLevel: 2, adaptiveFiltering: false }).toBuffer()
    }
  }
  await Promise.all(Array.from({ length: 2 * availableParallelism() }, lane))
  return (performance.now() - started) / 1000
}

/** lib/work/stamps/encode-png.ts in a thread for each processor; the time is that of the threads at work, their start left out. */
export async function floorOfOwnEncoder(pictures: readonly Picture[]): Promise<number> {
  const threads = availableParallelism()
  const code = threadCode()
  const times = await Promise.all(
    Array.from({ length: threads }, async (_, share) => {
      const workerData = pictures.filter((_picture, k) => k % threads === share)
      const worker = new Worker(code, { eval: true, workerData })
      const time = await new Promise<number>((resolve, reject) => {
        worker.once('message', resolve)
        worker.once('error', reject)
      })
      await worker.terminate()
      return time
    }),
  )
  return Math.max(...times) / 1000
}

let bundled: string | null = null

function threadCode(): string {
  bundled ??= buildSync({
    stdin: {
      contents: `
        import { parentPort, workerData } from 'node:worker_threads'
        import { encodePng } from '@/lib/work/stamps/encode-png'
        for (const picture of workerData) encodePng(picture)
        const started = performance.now()
        for (const picture of workerData) encodePng(picture)
        parentPort.postMessage(performance.now() - started)`,
      resolveDir: process.cwd(),
    },
    bundle: true,
    write: false,
    platform: 'node',
    format: 'cjs',
  }).outputFiles[0].text
  return bundled
}
