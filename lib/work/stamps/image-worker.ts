/**
 * The image workers' side of the pool: bundled to dist-workers/image-worker.mjs (npm run workers), so nothing here may
 * touch the database, the settings or Next. Also called directly by tests.
 */
import { readFileSync } from 'node:fs'
import { setPriority } from 'node:os'
import { isMainThread } from 'node:worker_threads'
import { bandsOfFile } from '@/lib/work/intake/bands-of-file'
import { candidateOfHeaders } from '@/lib/work/intake/candidate-of-header'
import { packManifest, type PackedManifest } from '@/lib/work/intake/pack-manifest'
import { parseManifest } from '@/lib/work/intake/parse-manifest'
import { codePlanes } from './code-planes'
import { drawPreview } from './draw-stamps'
import { imageCandidate } from './image-candidate'
import { paintCandidate } from './paint-candidate'
import type { PaintMade, PaintTask } from './paint-task'
import { openFits } from './read-cutout'
import { StampWriter } from './stamp-store'
import type {
  CandidateOutcome,
  FileProbe,
  ImageTask,
  ManifestTask,
  PlanesMade,
  PlanesTask,
  PreviewMade,
  PreviewTask,
  ProbeTask,
  StoredFile,
} from './worker-tasks'

// Requests go before imaging. On Linux this is the niceness of the calling thread alone (setpriority(2), 'C library/kernel
// differences'); elsewhere it would be that of the whole server.
if (!isMainThread && process.platform === 'linux') setPriority(10)

export async function image(task: ImageTask): Promise<CandidateOutcome[]> {
  const stamps = new StampWriter(task.stampFolder)
  const outcomes: CandidateOutcome[] = []
  for (const candidate of task.candidates) outcomes.push(await imageCandidate(candidate, task, stamps))
  stamps.write()
  return outcomes
}

export const planes = (task: PlanesTask): Promise<PlanesMade> => codePlanes(task)

export const preview = (task: PreviewTask): Promise<PreviewMade> => drawPreview(task)

export const paint = (task: PaintTask): Promise<PaintMade> => paintCandidate(task)

export async function probe({ files, bands }: ProbeTask): Promise<FileProbe[]> {
  const probes: FileProbe[] = []
  for (const file of files) probes.push(await probeFile(file, bands))
  return probes
}

async function probeFile(file: StoredFile, bands: string[]): Promise<FileProbe> {
  const fits = await openFits(file)
  if ('refusal' in fits) return { id: file.id, object: null, manyBands: false, refusal: fits.refusal }
  const found = bandsOfFile(fits, null, bands, file.name)
  const manyBands = 'places' in found && found.places.length > 1
  return {
    id: file.id,
    object: candidateOfHeaders([...fits.images.map(({ header }) => header), fits.primary]),
    manyBands,
    refusal: null,
  }
}

export async function manifest({ path, columns }: ManifestTask): Promise<PackedManifest> {
  const chosen = columns === null ? {} : (JSON.parse(columns) as Record<string, string>)
  return packManifest(parseManifest(readFileSync(path), chosen))
}
