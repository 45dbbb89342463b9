/** How a candidate's stamps are made from its cutouts. Plain JSON, so that it can be stored, hashed and repeated. */

/** Brightness limits in units of the sky noise of the picture, counted from the sky. */
export interface LimitsSigma {
  /** This far above (below, when negative) the sky is black. */
  blackSigma: number
  /** Where the curve turns from linear to logarithmic, above black. */
  softeningSigma: number
  /** White follows the picture: the value that this percentage of its pixels stays below ... */
  whitePercentile: number
  /** ... but never less than this, so that bare noise stays dark, ... */
  leastWhiteSigma: number
  /** ... nor more than this, so that a bright star does not hide all else. */
  mostWhiteSigma: number
}

export interface ColourLimits extends LimitsSigma {
  /** Colour fades to grey where the intensity, smoothed over 3 by 3 pixels, is below this: noise has no hue. */
  hueFromSigma: number
  /** Factor on the distance of each channel from grey; 1 leaves colours as they are. */
  saturation: number
}

export interface DeepLimits extends LimitsSigma {
  /** Smooth with the 3 by 3 binomial kernel first, which lifts what is wider than a pixel out of the noise. */
  smooth: boolean
}

/** How pictures are drawn by one recipe. Where drawing changes so that pictures differ, it is raised. */
export const DRAWING = 2

export interface Recipe {
  /** 1: every pixel has its hue. 2: clipped pixels have none (neutral-cores.ts). */
  version: 1 | typeof DRAWING
  /** Keys of the views wanted, in the order in which they are shown. */
  views: string[]
  colour: ColourLimits
  deep: DeepLimits
  band: LimitsSigma
  /** Parts added since version 1 first shipped: a stored recipe without them gets those of `extraLimits`. */
  residual?: ColourLimits
  blue?: DeepLimits
  core?: ColourLimits
  /** Side of the close field of view, arcsec, beside the whole cutout; 12 where none is given. */
  closeFieldArcsec?: number
  /** Pictures are turned so that north is up and east is left, where the headers say how they lie. */
  northUp?: boolean
  /** Factor on a band's noise-normalised brightness in the colour view, by band; 1 where none is given. */
  weights?: Record<string, number>
}

export interface ViewName {
  key: string
  label: string
}

const BAND_PREFIX = 'band:'

export const bandViewKey = (band: string): string => BAND_PREFIX + band

/** The band of a band view's key, null for any other view. */
export function bandOfView(key: string): string | null {
  return key.startsWith(BAND_PREFIX) ? key.slice(BAND_PREFIX.length) : null
}

export const CLOSE_FIELD_ARCSEC = 12

/** Limits of the views that a stored recipe may not know, its own where it has them. */
export function extraLimits(recipe: Recipe): { residual: ColourLimits; blue: DeepLimits; core: ColourLimits } {
  return {
    residual: recipe.residual ?? {
      blackSigma: -1.2,
      softeningSigma: 5,
      whitePercentile: 99.7,
      leastWhiteSigma: 25,
      mostWhiteSigma: 120,
      hueFromSigma: 0.8,
      saturation: 1,
    },
    blue: recipe.blue ?? {
      blackSigma: -1,
      softeningSigma: 4,
      whitePercentile: 99.7,
      leastWhiteSigma: 25,
      mostWhiteSigma: 150,
      smooth: true,
    },
    core: recipe.core ?? {
      blackSigma: 0,
      softeningSigma: 25,
      whitePercentile: 99.97,
      leastWhiteSigma: 50,
      mostWhiteSigma: 30000,
      hueFromSigma: 2,
      saturation: 1.1,
    },
  }
}

/** Side of the close field of view of a recipe, arcsec. */
export const closeFieldOf = (recipe: Recipe): number => recipe.closeFieldArcsec ?? CLOSE_FIELD_ARCSEC

/** Views made of several bands, in the order of the default recipe: key, label, bands needed. */
const COMBINED_VIEWS: readonly (ViewName & { bands: number })[] = [
  { key: 'colour', label: 'Colour', bands: 2 },
  { key: 'deep', label: 'Deep', bands: 1 },
  { key: 'residual', label: 'Lens removed', bands: 1 },
  { key: 'blue', label: 'Blue only', bands: 2 },
  { key: 'core', label: 'Bright core', bands: 2 },
]

/** Colour, deep, lens removed, blue only, bright core and each band, with limits chosen by eye on simulated and real cutouts (common practice, no source). */
export function defaultRecipe(bands: string[]): Recipe {
  const combined = COMBINED_VIEWS.filter((view) => bands.length >= view.bands).map((view) => view.key)
  return {
    version: DRAWING,
    views: [...(bands.length > 0 ? combined : ['deep']), ...bands.map(bandViewKey)],
    colour: {
      blackSigma: -1,
      softeningSigma: 6,
      whitePercentile: 99.9,
      leastWhiteSigma: 40,
      mostWhiteSigma: 600,
      hueFromSigma: 0.8,
      saturation: 1,
    },
    deep: {
      blackSigma: -0.8,
      softeningSigma: 3,
      whitePercentile: 99.5,
      leastWhiteSigma: 25,
      mostWhiteSigma: 300,
      smooth: true,
    },
    band: { blackSigma: -1.5, softeningSigma: 4, whitePercentile: 99.7, leastWhiteSigma: 15, mostWhiteSigma: 300 },
  }
}

/** JSON with the keys of every object in code-unit order and no spaces: equal recipes give equal text, for hashing. */
export function canonicalRecipe(recipe: Recipe): string {
  return JSON.stringify(recipe, (_key, value: unknown) =>
    value !== null && typeof value === 'object' && !Array.isArray(value)
      ? Object.fromEntries(Object.entries(value).sort(([a], [b]) => (a < b ? -1 : a > b ? 1 : 0)))
      : value,
  )
}

/**
 * The views of a recipe that exist for these bands, in order, with the label shown to people. Views of colour need two
 * bands; a band view needs its band; unknown keys are left out.
 */
export function viewsOf(recipe: Recipe, bands: string[]): ViewName[] {
  const views: ViewName[] = []
  for (const key of recipe.views) {
    const band = bandOfView(key)
    const combined = COMBINED_VIEWS.find((view) => view.key === key)
    if (combined && bands.length >= combined.bands) views.push({ key, label: combined.label })
    else if (band !== null && bands.includes(band)) views.push({ key, label: band })
  }
  return views
}

/** The label of a view by its key alone, for pictures whose recipe is not at hand; a key that is not known stands for itself. */
export const viewLabel = (key: string): string =>
  COMBINED_VIEWS.find((view) => view.key === key)?.label ?? bandOfView(key) ?? key

/** The optical and near-infrared filters whose order everybody in the trade knows, shortest wavelength first. From memory. */
const BAND_ORDER = ['u', 'g', 'r', 'i', 'z', 'y', 'Y', 'J', 'H', 'K']

/** Where a view stands among others by its key alone: those of several bands as in the default recipe, then bands by wavelength. */
export function viewPlace(key: string): number {
  const combined = COMBINED_VIEWS.findIndex((view) => view.key === key)
  if (combined >= 0) return combined
  const band = BAND_ORDER.indexOf(bandOfView(key) ?? '')
  return COMBINED_VIEWS.length + (band >= 0 ? band : BAND_ORDER.length)
}
