import type { PackedManifest } from '@/lib/work/intake/pack-manifest'
import type { Recipe } from '@/lib/science/imaging/recipe'
import type { SkyPosition } from '@/lib/science/sky/separation'

/** What crosses between the server and its image workers: names and numbers, and pixels only coded and zipped. */

export interface StoredFile {
  id: number
  name: string
  sha256: string
  /** Where its bytes are. */
  path: string
}

export interface FileToRead extends StoredFile {
  /** The band that the manifest or the file name told; null leaves it to the header. */
  band: string | null
}

/** A plane that the candidate has from a file read earlier. */
export interface HeldPlane {
  band: string
  hdu: number
  planeIndex: number
  file: StoredFile
}

export interface CandidateToImage {
  name: string
  files: FileToRead[]
  held: HeldPlane[]
  manifestPosition: SkyPosition | null
}

export interface ImageTask {
  /** In order of wavelength. */
  bands: string[]
  recipe: Recipe
  stampFolder: string
  candidates: CandidateToImage[]
}

export interface PlaneRead {
  fileId: number
  band: string
  hdu: number
  planeIndex: number
  width: number
  height: number
  /** JSON of the Wcs object. */
  wcs: string | null
  pixelScaleArcsec: number | null
  background: number
  noise: number
}

export interface FileOutcome {
  id: number
  fate: 'read' | 'duplicate' | 'refused'
  fault: string | null
  /** Why it is refused, or what one should know of a file that is read. */
  reason: string | null
  duplicateOf: number | null
}

export interface StampMade {
  view: string
  sha256: string
  bytes: number
  width: number
  height: number
  note: string | null
}

export interface PlannedPlane {
  band: string
  hdu: number
  planeIndex: number
  fileId: number
}

export const plannedPlanes = ({ held }: CandidateToImage): PlannedPlane[] =>
  held.map(({ band, hdu, planeIndex, file }) => ({ band, hdu, planeIndex, fileId: file.id }))

/** Begins the part of a file's reason that is true until its candidate is imaged. */
export const NOT_IMAGED = 'Not imaged: '

export interface CandidateOutcome {
  name: string
  /** The planes that it was to be drawn with: the outcome holds only where the candidate still has these. */
  planned: PlannedPlane[]
  files: FileOutcome[]
  /** Of the files read now. */
  planes: PlaneRead[]
  /** Of the first band that has a WCS. */
  position: SkyPosition | null
  pixelScaleArcsec: number | null
  /** null: not imaged, because nothing could be read or `imagingFault` says why. */
  stamps: StampMade[] | null
  imagingFault: string | null
}

export interface ProbeTask {
  files: StoredFile[]
  bands: string[]
}

export interface FileProbe {
  id: number
  /** What the headers call the object, such as a candidate or a survey tile. */
  object: { keyword: string; name: string } | null
  /** It holds several bands as extensions or as a cube. */
  manyBands: boolean
  refusal: { fault: string; reason: string } | null
}

export interface PlanesTask {
  /** In order of wavelength. */
  planes: HeldPlane[]
  recipe: Recipe
}

/** Gzipped (lib/science/imaging/plane-codec.ts), or the name of the file that can no longer be read. */
export type PlanesMade = { bytes: Uint8Array<ArrayBuffer> } | { lost: string }

export interface PlanesRunner {
  planes(task: PlanesTask): Promise<PlanesMade>
}

export interface PreviewTask {
  /** In order of wavelength. */
  planes: HeldPlane[]
  recipe: Recipe
}

export interface ViewDrawn {
  key: string
  width: number
  height: number
  note: string | null
  png: Uint8Array
}

/** The views that can be made, or the name of the file that can no longer be read. */
export type PreviewMade = { views: ViewDrawn[] } | { lost: string }

export interface PreviewRunner {
  preview(task: PreviewTask): Promise<PreviewMade>
}

export interface ManifestTask {
  path: string
  /** JSON of the columns that a lead has chosen, or null. */
  columns: string | null
}

/** Done by a pool of threads in the server, and directly in tests. */
export interface ImageRunner {
  image(task: ImageTask): Promise<CandidateOutcome[]>
  probe(task: ProbeTask): Promise<FileProbe[]>
  manifest(task: ManifestTask): Promise<PackedManifest>
}
