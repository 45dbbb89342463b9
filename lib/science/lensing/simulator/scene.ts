/**
 * What is in front of the telescope: layers of light, each one brightness pattern times a flux per band, on a canvas
 * wider than the cutout so that light scatters in from outside. Positions in arcsec from the middle of the cutout, x to
 * the right, y up.
 */
import type { SurveyModel } from '../survey-model'

/** Surface brightness at a position, 1 / arcsec^2 (times the flux of the layer). */
export type Brightness = (x: number, y: number) => number

export interface Layer {
  /** Light in each canvas pixel as a share of the layer's flux. */
  image: Float64Array
  /** Flux units, one a band. */
  fluxes: number[]
  /** Light from behind the lens: what a grader looks for. */
  isLensed: boolean
}

export interface PointSource {
  x: number
  y: number
  fluxes: number[]
}

/** Cutout pixels added on every side. */
export const MARGIN = 12

export class Scene {
  readonly layers: Layer[] = []
  readonly points: PointSource[] = []
  readonly width: number
  readonly height: number

  constructor(readonly survey: SurveyModel) {
    this.width = survey.width + 2 * MARGIN
    this.height = survey.height + 2 * MARGIN
  }

  xOf(column: number): number {
    return (column - (this.width - 1) / 2) * this.survey.pixelScaleArcsec
  }

  yOf(row: number): number {
    return (row - (this.height - 1) / 2) * this.survey.pixelScaleArcsec
  }

  fluxesOf(magnitudes: number[]): number[] {
    return magnitudes.map((magnitude) => 10 ** (0.4 * (this.survey.zeroPointMag - magnitude)))
  }

  /** Light whose brightness pattern integrates to 1 over the sky; the part off the canvas is lost. */
  add(brightness: Brightness, magnitudes: number[], sampling: Sampling = {}): void {
    this.layers.push({
      image: this.sample(brightness, sampling),
      fluxes: this.fluxesOf(magnitudes),
      isLensed: sampling.isLensed ?? false,
    })
  }

  /** Light of a pattern of any size, scaled so that what falls on the canvas has the magnitudes. */
  addScaled(brightness: Brightness, magnitudes: number[], sampling: Sampling = {}): void {
    const image = this.sample(brightness, sampling)
    let sum = 0
    for (let i = 0; i < image.length; i++) sum += image[i]
    if (sum > 0) for (let i = 0; i < image.length; i++) image[i] /= sum
    this.layers.push({ image, fluxes: this.fluxesOf(magnitudes), isLensed: sampling.isLensed ?? false })
  }

  /**
   * Integrates over each pixel by n x n points: `fine` of them within `fineRadiusArcsec` of (x, y), where galaxies are
   * steep, 2 elsewhere, 1 beyond five such radii.
   */
  private sample(brightness: Brightness, { x = 0, y = 0, fine = 6, fineRadiusArcsec = 0.7 }: Sampling): Float64Array {
    const { pixelScaleArcsec: scale } = this.survey
    const image = new Float64Array(this.width * this.height)
    for (let row = 0; row < this.height; row++) {
      const centreY = this.yOf(row)
      for (let column = 0; column < this.width; column++) {
        const centreX = this.xOf(column)
        const distance = Math.hypot(centreX - x, centreY - y)
        const count = distance < fineRadiusArcsec ? fine : distance < 5 * fineRadiusArcsec ? 2 : 1
        image[row * this.width + column] = pixelMean(brightness, centreX, centreY, scale, count) * scale * scale
      }
    }
    return image
  }
}

export interface Sampling {
  x?: number
  y?: number
  fine?: number
  fineRadiusArcsec?: number
  isLensed?: boolean
}

function pixelMean(brightness: Brightness, x: number, y: number, size: number, count: number): number {
  if (count === 1) return brightness(x, y)
  let sum = 0
  for (let j = 0; j < count; j++) {
    const sampleY = y + ((j + 0.5) / count - 0.5) * size
    for (let i = 0; i < count; i++) sum += brightness(x + ((i + 0.5) / count - 0.5) * size, sampleY)
  }
  return sum / (count * count)
}
