/**
 * What strong lenses are usually found to have. A value outside is a reason to look again, not to refuse.
 *
 * Sources: T. Treu, ARA&A 48, 87 (2010): massive early-type galaxies, Einstein radii about 1 arcsec, dispersions 200-300 km/s.
 * A. Bolton et al., ApJ 682, 964 (2008): dispersions 160-400 km/s, lenses at redshift 0.05-0.5, sources at 0.2-1.2 in a sample
 * selected by spectra of the lens. Radii of galaxies 0.5-3 arcsec in ground-based surveys, groups 3-10, clusters 10-50: common
 * practice, no single source. Redshifts up to 1 for lenses and 4 for sources, masses 10^10.5 to 10^12.2 solar: what those radii and
 * dispersions give there.
 */
export interface LensNumbers {
  radiusArcsec: number
  velocityDispersionKmS: number
  massSolar: number
  lensRedshift: number
  sourceRedshift: number
}

export interface UnusualValue {
  which: keyof LensNumbers
  /** a sentence: what is outside, of what, and what it may mean */
  sentence: string
}

interface UsualRange {
  low: number
  high: number
  below: string
  above: string
}

const USUAL: Readonly<Record<keyof LensNumbers, UsualRange>> = {
  radiusArcsec: {
    low: 0.5,
    high: 3,
    below: 'An Einstein radius below 0.5 arcsec is smaller than surveys from the ground resolve.',
    above:
      'An Einstein radius above 3 arcsec is that of a group (3 to 10 arcsec) or a cluster (10 to 50), not of one galaxy.',
  },
  velocityDispersionKmS: {
    low: 160,
    high: 400,
    below:
      'A velocity dispersion below 160 km/s is less than known lens galaxies have (160 to 400; Bolton et al. 2008).',
    above:
      'A velocity dispersion above 400 km/s is more than one galaxy has (160 to 400; Bolton et al. 2008): a group, or a redshift that is off.',
  },
  massSolar: {
    low: 10 ** 10.5,
    high: 10 ** 12.2,
    below: 'A mass below 10^10.5 solar masses inside the Einstein radius is little for a lens galaxy.',
    above: 'A mass above 10^12.2 solar masses inside the Einstein radius is that of a group or cluster.',
  },
  lensRedshift: {
    low: 0.05,
    high: 1,
    below: 'A lens nearer than redshift 0.05 needs a very compact mass to show separate images.',
    above: 'A lens beyond redshift 1 is rare and faint; check that lens and source are not exchanged.',
  },
  sourceRedshift: {
    low: 0.2,
    high: 4,
    below: 'A source nearer than redshift 0.2 is rarely lensed.',
    above: 'A source beyond redshift 4 is rare in ground-based surveys; check the redshift.',
  },
}

/** The sentences on what lies outside, in the order of the numbers; NaN is not judged. */
export function outOfTheUsual(numbers: LensNumbers): UnusualValue[] {
  return (Object.keys(USUAL) as (keyof LensNumbers)[]).flatMap((which) => {
    const { low, high, below, above } = USUAL[which]
    if (numbers[which] < low) return [{ which, sentence: below }]
    if (numbers[which] > high) return [{ which, sentence: above }]
    return []
  })
}
