import type { PaintingTruth } from '@/lib/science/lensing/painting/paint-lens'
import type { PaintingRanges } from '@/lib/science/lensing/painting/painting-ranges'
import type { Recipe } from '@/lib/science/imaging/recipe'
import type { SkyPosition } from '@/lib/science/sky/separation'
import type { HeldPlane, PlaneRead, ViewDrawn } from './worker-tasks'

/** A calibration stamp to be made of a candidate's cutouts, on an image thread. */
export interface PaintTask {
  /** In order of wavelength. */
  planes: HeldPlane[]
  /** Where a manifest or another band told it. */
  pixelScaleArcsec: number | null
  /** What is painted is drawn from these; null copies the galaxy as it is. */
  ranges: PaintingRanges | null
  seed: number
  /** What the new cutouts call their object; null where none are written. */
  name: string | null
  /** Where its middle is to lie; null moves it a little. */
  position: SkyPosition | null
  /** The views of this recipe are drawn too; null for none. */
  recipe: Recipe | null
}

export interface PaintedFile {
  band: string
  bytes: Uint8Array
  /** As `fileId` says nothing yet: 0. */
  plane: PlaneRead
}

export interface Painted {
  files: PaintedFile[]
  /** How the picture was turned before it was painted on. */
  turned: number
  /** Null of a copy. */
  truth: PaintingTruth | null
  /** Of its middle, moved from the galaxy's; null without a WCS. */
  position: SkyPosition | null
  views: ViewDrawn[]
}

/** The stamp; or a sentence that says why this galaxy cannot be used. */
export type PaintMade = Painted | { fault: string }

export interface PaintRunner {
  paint(task: PaintTask): Promise<PaintMade>
}
