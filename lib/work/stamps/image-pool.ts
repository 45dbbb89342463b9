import { existsSync } from 'node:fs'
import { availableParallelism } from 'node:os'
import path from 'node:path'
import { Piscina } from 'piscina'
import { config } from '@/lib/platform/config/config'
import type { PaintRunner } from './paint-task'
import type { ImageRunner, PlanesRunner, PreviewRunner } from './worker-tasks'

/** On globalThis because route handlers and instrumentation are bundled apart but share one process. */
const shared = globalThis as typeof globalThis & { ringsideImagePool?: Piscina }

export const workerCount = (): number => config().workers ?? Math.min(8, availableParallelism())

function pool(): Piscina {
  if (shared.ringsideImagePool) return shared.ringsideImagePool
  const filename = path.join(/* turbopackIgnore: true */ process.cwd(), 'dist-workers', 'image-worker.mjs')
  if (!existsSync(filename)) {
    throw new Error(
      `${filename} is missing. Make it with "npm run workers" (npm run dev, build and test do so by themselves) and start again.`,
    )
  }
  shared.ringsideImagePool = new Piscina({ filename, maxThreads: workerCount(), minThreads: 1, idleTimeout: 30_000 })
  return shared.ringsideImagePool
}

/** Work in threads of this process, so that reading and drawing never hold up a request. */
export const imagePool: ImageRunner & PlanesRunner & PreviewRunner & PaintRunner = {
  image: (task) => pool().run(task, { name: 'image' }),
  probe: (task) => pool().run(task, { name: 'probe' }),
  manifest: (task) => pool().run(task, { name: 'manifest' }),
  preview: (task) => pool().run(task, { name: 'preview' }),
  planes: (task) => pool().run(task, { name: 'planes' }),
  paint: (task) => pool().run(task, { name: 'paint' }),
}

/** For scripts, which would otherwise wait for the threads to idle out. */
export async function closeImagePool(): Promise<void> {
  await shared.ringsideImagePool?.destroy()
  shared.ringsideImagePool = undefined
}
