import { z } from 'zod'
import { DRAWING, viewsOf, type Recipe } from '@/lib/science/imaging/recipe'

const number = (what: string, least: number, most: number) =>
  z
    .number(`${what} is a number.`)
    .min(least, `${what} is between ${least} and ${most}.`)
    .max(most, `${what} is between ${least} and ${most}.`)

const limits = {
  blackSigma: number('Black', -20, 1000),
  softeningSigma: number('The softening', 0.01, 10_000),
  whitePercentile: number('The percentile for white', 50, 100),
  leastWhiteSigma: number('The least white', -10, 1e6),
  mostWhiteSigma: number('The most white', -10, 1e6),
}

interface White {
  blackSigma: number
  leastWhiteSigma: number
  mostWhiteSigma: number
}

function whiteIsAboveBlack({ blackSigma, leastWhiteSigma, mostWhiteSigma }: White, context: z.RefinementCtx): void {
  const fault = (path: string, message: string) => context.addIssue({ code: 'custom', path: [path], message })
  if (leastWhiteSigma <= blackSigma) fault('leastWhiteSigma', 'The least white must be above black.')
  if (mostWhiteSigma < leastWhiteSigma) fault('mostWhiteSigma', 'The most white cannot be below the least white.')
}

const Limits = z.strictObject(limits).superRefine(whiteIsAboveBlack)
const ColourLimits = z
  .strictObject({
    ...limits,
    hueFromSigma: number('The brightness that colour begins at', 0, 1000),
    saturation: number('The saturation', 0, 5),
  })
  .superRefine(whiteIsAboveBlack)
const DeepLimits = z
  .strictObject({ ...limits, smooth: z.boolean('Smoothing is true or false.') })
  .superRefine(whiteIsAboveBlack)

const CLOSE_FIELD = 'The close field, in arcsec,'

/** A recipe as it arrives, for a campaign of these bands. What is not known is refused, so that no misspelt part is lost. */
export function recipeInput(bands: string[]) {
  return z
    .strictObject({
      // An earlier drawing is taken and raised: pictures made from now on are of today's.
      version: z
        .literal([1, DRAWING], `The version of the form of a recipe is ${DRAWING}.`)
        .default(DRAWING)
        .transform((): typeof DRAWING => DRAWING),
      views: z
        .array(z.string(), 'The views are a list of keys, such as "colour".')
        .min(1, 'Choose at least one view: without one there is nothing to judge.')
        .max(40, 'At most 40 views.')
        .refine((views) => new Set(views).size === views.length, 'Each view is shown once.'),
      colour: ColourLimits,
      deep: DeepLimits,
      band: Limits,
      residual: ColourLimits.optional(),
      blue: DeepLimits.optional(),
      core: ColourLimits.optional(),
      closeFieldArcsec: number(CLOSE_FIELD, 0.5, 600).optional(),
      northUp: z.boolean('North up is true or false.').optional(),
      weights: z.record(z.string(), number('The weight of a band', 0.05, 20)).optional(),
    })
    .superRefine((recipe, context) => {
      const fault = (path: string, message: string) => context.addIssue({ code: 'custom', path: [path], message })
      const known = viewsOf(recipe satisfies Recipe, bands).map(({ key }) => key)
      const unknown = recipe.views.filter((key) => !known.includes(key))
      if (unknown.length > 0) {
        fault('views', `Bands ${bands.join(', ')} do not make the view ${unknown.join(', ')}.`)
      }
      const strange = Object.keys(recipe.weights ?? {}).filter((band) => !bands.includes(band))
      if (strange.length > 0) fault('weights', `The campaign has no band ${strange.join(', ')}.`)
    })
}
