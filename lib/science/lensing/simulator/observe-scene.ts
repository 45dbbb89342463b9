/** From a scene to what the survey records: seeing, photon noise of objects, sky noise, saturation. */
import { MARGIN, type Layer, type Scene } from './scene'
import { convolve, pointSpread, pointSpreadKernel, type Kernel } from './point-spread'
import type { SeededRandom } from '../seeded-random'
import type { SurveyBand } from '../survey-model'

const KERNEL_RADIUS = 10

/** Noise-free canvas of one band. */
export function blurredScene(scene: Scene, bandIndex: number, include: (layer: Layer) => boolean): Float64Array {
  const band = scene.survey.bands[bandIndex]
  const light = new Float64Array(scene.width * scene.height)
  for (const layer of scene.layers) {
    if (!include(layer)) continue
    const flux = layer.fluxes[bandIndex]
    for (let i = 0; i < light.length; i++) light[i] += flux * layer.image[i]
  }
  return convolve(light, scene.width, scene.height, kernelOf(band, scene.survey.pixelScaleArcsec))
}

const kernels = new WeakMap<SurveyBand, Kernel>()

function kernelOf(band: SurveyBand, pixelScaleArcsec: number): Kernel {
  const known = kernels.get(band)
  if (known) return known
  const kernel = pointSpreadKernel(band, pixelScaleArcsec, KERNEL_RADIUS)
  kernels.set(band, kernel)
  return kernel
}

/** Point sources with the full wings of the point-spread function, however far they reach. */
export function addPoints(canvas: Float64Array, scene: Scene, bandIndex: number): void {
  const { bands, pixelScaleArcsec } = scene.survey
  const profile = pointSpread(bands[bandIndex])
  const area = pixelScaleArcsec ** 2
  for (const { x, y, fluxes } of scene.points) {
    for (let row = 0; row < scene.height; row++) {
      for (let column = 0; column < scene.width; column++) {
        const distance = Math.hypot(scene.xOf(column) - x, scene.yOf(row) - y)
        canvas[row * scene.width + column] += fluxes[bandIndex] * area * profile(distance)
      }
    }
  }
}

/** The cutout's part of a canvas, without noise. */
export function cropCanvas(scene: Scene, canvas: Float64Array): Float32Array {
  const { width, height } = scene.survey
  return Float32Array.from({ length: width * height }, (_, i) => {
    const row = Math.floor(i / width) + MARGIN
    return canvas[row * scene.width + (i % width) + MARGIN]
  })
}

/** The cutout of a canvas with Poisson noise of the light and normal noise of the sky, sky subtracted. */
export function recordCutout(
  canvas: Float64Array,
  scene: Scene,
  { skyNoise, electronsPerFlux }: SurveyBand,
  random: SeededRandom,
): Float32Array {
  const { width, height } = scene.survey
  const data = new Float32Array(width * height)
  for (let row = 0; row < height; row++) {
    for (let column = 0; column < width; column++) {
      const light = canvas[(row + MARGIN) * scene.width + column + MARGIN]
      const electrons = random.poisson(light * electronsPerFlux)
      data[row * width + column] = electrons / electronsPerFlux + skyNoise * random.normal()
    }
  }
  return data
}
