/** Point-spread functions: Moffat (A. Moffat, A&A 3, 455 (1969)) or Gaussian, circular, total light 1. */
import type { SurveyBand } from '../survey-model'

/** Brightness (distance in arcsec) -> 1 / arcsec^2. */
export function pointSpread({ seeingArcsec, moffatBeta }: SurveyBand): (distanceArcsec: number) => number {
  if (!Number.isFinite(moffatBeta)) {
    const variance = (seeingArcsec / 2) ** 2 / (2 * Math.LN2)
    return (r) => Math.exp((-r * r) / (2 * variance)) / (2 * Math.PI * variance)
  }
  const alphaSquared = (seeingArcsec / 2) ** 2 / (2 ** (1 / moffatBeta) - 1)
  const peak = (moffatBeta - 1) / (Math.PI * alphaSquared)
  return (r) => peak * (1 + (r * r) / alphaSquared) ** -moffatBeta
}

export interface Kernel {
  radius: number
  /** (2 radius + 1)^2 values that sum to 1. */
  values: Float64Array
}

/** The function integrated over pixels, cut at `radius` pixels and scaled back to a sum of 1. */
export function pointSpreadKernel(band: SurveyBand, pixelScaleArcsec: number, radius = 10): Kernel {
  const profile = pointSpread(band)
  const side = 2 * radius + 1
  const values = new Float64Array(side * side)
  const points = 5
  let sum = 0
  for (let y = -radius; y <= radius; y++) {
    for (let x = -radius; x <= radius; x++) {
      let value = 0
      for (let j = 0; j < points; j++) {
        for (let i = 0; i < points; i++) {
          const dx = x + (i + 0.5) / points - 0.5
          const dy = y + (j + 0.5) / points - 0.5
          value += profile(Math.hypot(dx, dy) * pixelScaleArcsec)
        }
      }
      values[(y + radius) * side + x + radius] = value
      sum += value
    }
  }
  for (let i = 0; i < values.length; i++) values[i] /= sum
  return { radius, values }
}

/** Convolution of an image by an even kernel; beyond the edges the image is dark. */
export function convolve(image: Float64Array, width: number, height: number, { radius, values }: Kernel): Float64Array {
  const side = 2 * radius + 1
  const result = new Float64Array(image.length)
  const padded = new Float64Array(width + 2 * radius)
  for (let row = 0; row < height; row++) {
    padded.set(image.subarray(row * width, (row + 1) * width), radius)
    for (let dy = 0; dy <= radius; dy++) {
      const weights = values.subarray((radius + dy) * side, (radius + dy + 1) * side)
      const line = convolveLine(padded, width, radius, weights)
      if (row + dy < height) addLine(result, (row + dy) * width, line)
      if (dy > 0 && row - dy >= 0) addLine(result, (row - dy) * width, line)
    }
  }
  return result
}

function convolveLine(padded: Float64Array, width: number, radius: number, weights: Float64Array): Float64Array {
  const line = new Float64Array(width)
  const middle = weights[radius]
  for (let x = 0; x < width; x++) line[x] = middle * padded[x + radius]
  for (let dx = 1; dx <= radius; dx++) {
    const weight = weights[radius + dx]
    const left = radius - dx
    const right = radius + dx
    for (let x = 0; x < width; x++) line[x] += weight * (padded[x + left] + padded[x + right])
  }
  return line
}

function addLine(result: Float64Array, start: number, line: Float64Array): void {
  for (let x = 0; x < line.length; x++) result[start + x] += line[x]
}
