/**
 * Several people's measurements of one radius, combined, with their scatter shown.
 *
 * The value is the mean weighted by 1 / error^2. Where people differ by more than their errors say, the error is widened by the
 * scale factor S = sqrt(chi^2 / (n - 1)): Particle Data Group, Review of Particle Physics, Introduction, section 5.2.2. People who
 * click the same pixels share what is wrong with them, so that the error of the mean is the least that it can be.
 */

export interface RadiusMeasurement {
  radiusArcsec: number
  /** 1 sigma, above 0; null when none was given */
  errorArcsec: number | null
}

export interface CombinedRadius {
  count: number
  /** weighted by 1 / error^2, or the plain mean when an error is missing */
  radiusArcsec: number
  /** of the mean, widened by the scale factor; null for one measurement without an error */
  errorArcsec: number | null
  isWeighted: boolean
  medianArcsec: number
  /** standard deviation between people, n - 1; null for one measurement */
  scatterArcsec: number | null
  smallestArcsec: number
  largestArcsec: number
  chiSquared: number | null
  /** 1 where people agree within their errors */
  scaleFactor: number
  /** places of measurements further from the median than 3 of both errors together; three or more are needed to tell */
  apart: number[]
  notes: string[]
}

/** @returns null for no measurement. @throws RangeError for a radius or error that is not a number above 0. */
export function combineRadii(measurements: readonly RadiusMeasurement[]): CombinedRadius | null {
  if (measurements.length === 0) return null
  for (const [k, { radiusArcsec, errorArcsec }] of measurements.entries()) {
    if (!(radiusArcsec > 0 && Number.isFinite(radiusArcsec))) {
      throw new RangeError(
        `Measurement ${k + 1} has the radius ${radiusArcsec}; it must be a number of arcsec above 0.`,
      )
    }
    if (errorArcsec !== null && !(errorArcsec > 0 && Number.isFinite(errorArcsec))) {
      throw new RangeError(`Measurement ${k + 1} has the error ${errorArcsec}; it must be a number of arcsec above 0.`)
    }
  }
  const count = measurements.length
  const radii = measurements.map(({ radiusArcsec }) => radiusArcsec)
  const errors = measurements.map(({ errorArcsec }) => errorArcsec).filter((error) => error !== null)
  const isWeighted = errors.length === count
  const plainMean = radii.reduce((sum, radius) => sum + radius, 0) / count
  const scatterArcsec =
    count > 1 ? Math.sqrt(radii.reduce((sum, radius) => sum + (radius - plainMean) ** 2, 0) / (count - 1)) : null
  const weighted = isWeighted ? weightedMean(radii, errors) : null
  const chiSquared = weighted
    ? radii.reduce((sum, radius, k) => sum + ((radius - weighted.mean) / errors[k]) ** 2, 0)
    : null
  const scaleFactor = chiSquared !== null && count > 1 ? Math.max(1, Math.sqrt(chiSquared / (count - 1))) : 1
  const errorOfPlainMean = scatterArcsec === null ? measurements[0].errorArcsec : scatterArcsec / Math.sqrt(count)
  const apart = isWeighted ? thoseApart(radii, errors) : []
  return {
    count,
    radiusArcsec: weighted?.mean ?? plainMean,
    errorArcsec: weighted ? weighted.error * scaleFactor : errorOfPlainMean,
    isWeighted,
    medianArcsec: medianOf(radii),
    scatterArcsec,
    smallestArcsec: Math.min(...radii),
    largestArcsec: Math.max(...radii),
    chiSquared,
    scaleFactor,
    apart,
    notes: notesOn(count, isWeighted, scaleFactor, apart),
  }
}

function weightedMean(values: readonly number[], errors: readonly number[]): { mean: number; error: number } {
  let [sum, weights] = [0, 0]
  for (const [k, value] of values.entries()) {
    const weight = 1 / errors[k] ** 2
    sum += weight * value
    weights += weight
  }
  return { mean: sum / weights, error: 1 / Math.sqrt(weights) }
}

/** The median is not drawn along by the one that lies apart; its error is 1.25 times that of the mean for normal errors. */
function thoseApart(radii: readonly number[], errors: readonly number[]): number[] {
  if (radii.length < 3) return []
  const median = medianOf(radii)
  const medianError = 1.25 * weightedMean(radii, errors).error
  return radii.flatMap((radius, k) => (Math.abs(radius - median) > 3 * Math.hypot(errors[k], medianError) ? [k] : []))
}

function medianOf(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b)
  const half = sorted.length >> 1
  return sorted.length % 2 === 1 ? sorted[half] : (sorted[half - 1] + sorted[half]) / 2
}

function notesOn(count: number, isWeighted: boolean, scaleFactor: number, apart: readonly number[]): string[] {
  const notes: string[] = []
  if (count === 1) notes.push('One measurement: how far people would differ is not known.')
  if (!isWeighted && count > 1) notes.push('Not every measurement has an error, so that all count alike.')
  if (scaleFactor > 1) {
    notes.push(`People differ by more than their errors: the error is widened ${scaleFactor.toFixed(1)} times.`)
  }
  if (apart.length > 0) {
    const which = apart.map((place) => place + 1).join(', ')
    notes.push(`Measurement ${which} lies more than 3 errors from the others; look whether the same arc was measured.`)
  }
  return notes
}
