/** The imaging that a simulated candidate is seen through. */

export interface SurveyBand {
  band: string
  /** Full width at half maximum of the point-spread function. */
  seeingArcsec: number
  /** Moffat beta; Infinity for a Gaussian. */
  moffatBeta: number
  /** Standard deviation of the sky in one pixel, in flux units (AB zero point `zeroPointMag`). */
  skyNoise: number
  /** Photo-electrons per flux unit: sets the Poisson noise of objects. */
  electronsPerFlux: number
}

export interface SurveyModel {
  name: string
  /** Shortest wavelength first. */
  bands: SurveyBand[]
  pixelScaleArcsec: number
  width: number
  height: number
  /** AB magnitude of a flux of 1. */
  zeroPointMag: number
}

/**
 * The invented Saltmarsh Wide Survey. Sky noise follows from sky surface brightnesses of 22.0, 21.2 and 20.4
 * mag/arcsec^2 and an exposure that gives 5-sigma point sources of about 26.2, 25.8 and 25.4 mag: a 4-m class wide
 * survey (common practice, no source).
 */
export const SALTMARSH_WIDE_SURVEY: SurveyModel = {
  name: 'Saltmarsh Wide Survey',
  bands: [
    { band: 'g', seeingArcsec: 0.8, moffatBeta: 3.2, skyNoise: 1.0, electronsPerFlux: 63 },
    { band: 'r', seeingArcsec: 0.76, moffatBeta: 3.4, skyNoise: 1.45, electronsPerFlux: 63 },
    { band: 'i', seeingArcsec: 0.72, moffatBeta: 3.6, skyNoise: 2.1, electronsPerFlux: 63 },
  ],
  pixelScaleArcsec: 0.2,
  width: 80,
  height: 80,
  zeroPointMag: 30,
}
