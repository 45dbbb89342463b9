/**
 * Several people's measurements of one radius, combined, with their scatter shown.
 *
 * The value is the mean weighted by 1 / error^2. Where people differ by more than their errors say, the error is widened by the
 * scale factor S = sqrt(chi^2 / (n - 1)): Particle Data Group, Review of Particle Physics, Introduction, section 5.2.2. People who
 * click the same pixels share what is wrong with them, so that the error of the mean is the least that it can be.
 *
 * One without an error, such as a model set by hand, has no weight: it is shown beside those that have one and does not move them.
 * Where nobody's error is known the value is the plain mean and its error comes from their scatter;
 * values that agree to the last digit measure no error.
 */

export interface RadiusMeasurement {
  radiusArcsec: number
  /** 1 sigma, above 0; null when none was given */
  errorArcsec: number | null
}

export interface CombinedRadius {
  count: number
  /** of those with an error, weighted by 1 / error^2; the plain mean where nobody has one */
  radiusArcsec: number
  /** of the mean, widened by the scale factor; null where no error is known and scatter gives none */
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
  /** places of measurements further from the median of those with an error than 3 of both errors together; three or more are needed to tell */
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
  const all = measurements.map(({ radiusArcsec }) => radiusArcsec)
  const places = measurements.flatMap(({ errorArcsec }, k) => (errorArcsec === null ? [] : [k]))
  const isWeighted = places.length > 0
  const radii = places.map((k) => all[k])
  const errors = places.map((k) => measurements[k].errorArcsec!)
  const plainMean = all.reduce((sum, radius) => sum + radius, 0) / count
  const scatterArcsec =
    count > 1 ? Math.sqrt(all.reduce((sum, radius) => sum + (radius - plainMean) ** 2, 0) / (count - 1)) : null
  const weighted = isWeighted ? weightedMean(radii, errors) : null
  const chiSquared = weighted
    ? radii.reduce((sum, radius, k) => sum + ((radius - weighted.mean) / errors[k]) ** 2, 0)
    : null
  const scaleFactor =
    chiSquared !== null && radii.length > 1 ? Math.max(1, Math.sqrt(chiSquared / (radii.length - 1))) : 1
  const isScattered = scatterArcsec !== null && scatterArcsec > 1e-9 * plainMean
  const apart = isWeighted ? thoseApart(all, measurements, places) : []
  return {
    count,
    radiusArcsec: weighted?.mean ?? plainMean,
    errorArcsec: weighted ? weighted.error * scaleFactor : isScattered ? scatterArcsec / Math.sqrt(count) : null,
    isWeighted,
    medianArcsec: medianOf(all),
    scatterArcsec,
    smallestArcsec: Math.min(...all),
    largestArcsec: Math.max(...all),
    chiSquared,
    scaleFactor,
    apart,
    notes: notesOn({ count, weighted: radii.length, scaleFactor, apart }),
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

/**
 * The median is not drawn along by the one that lies apart; its error is 1.25 times that of the mean for normal errors. One without
 * an error lies apart by the errors of the others.
 */
function thoseApart(
  all: readonly number[],
  measurements: readonly RadiusMeasurement[],
  places: readonly number[],
): number[] {
  if (all.length < 3 || places.length < 2) return []
  const radii = places.map((k) => all[k])
  const errors = places.map((k) => measurements[k].errorArcsec!)
  const median = medianOf(radii)
  const medianError = 1.25 * weightedMean(radii, errors).error
  const usualError = medianOf(errors)
  return all.flatMap((radius, k) => {
    const error = measurements[k].errorArcsec ?? usualError
    return Math.abs(radius - median) > 3 * Math.hypot(error, medianError) ? [k] : []
  })
}

function medianOf(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b)
  const half = sorted.length >> 1
  return sorted.length % 2 === 1 ? sorted[half] : (sorted[half - 1] + sorted[half]) / 2
}

function notesOn(of: { count: number; weighted: number; scaleFactor: number; apart: readonly number[] }): string[] {
  const { count, weighted, scaleFactor, apart } = of
  const notes: string[] = []
  if (count === 1) notes.push('One measurement: how far people would differ is not known.')
  if (count > 1 && weighted === 0) notes.push('Nobody’s error is known, so that all count alike.')
  else if (weighted < count && count > 1) {
    const others = count - weighted
    const which = others === 1 ? 'One measurement without an error is' : `${others} measurements without errors are`
    notes.push(`${which} shown and not in the value.`)
  }
  if (scaleFactor > 1) {
    notes.push(`People differ by more than their errors: the error is widened ${scaleFactor.toFixed(1)} times.`)
  }
  if (apart.length > 0) {
    const which = apart.map((place) => place + 1).join(', ')
    notes.push(`Measurement ${which} lies more than 3 errors from the others; look whether the same arc was measured.`)
  }
  return notes
}
