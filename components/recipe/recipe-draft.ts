/** Changes to a recipe that is being edited, and what differs between two. */
import {
  bandOfView,
  bandViewKey,
  canonicalRecipe,
  closeFieldOf,
  defaultRecipe,
  extraLimits,
  viewsOf,
  type ColourLimits,
  type DeepLimits,
  type LimitsSigma,
  type Recipe,
  type ViewName,
} from '@/lib/science/imaging/recipe'

export type LimitsKey = 'colour' | 'deep' | 'residual' | 'blue' | 'core' | 'band'
export type AnyLimits = LimitsSigma & Partial<ColourLimits> & Partial<DeepLimits>
export type WholeRecipe = Required<Recipe>

/** With every part spelt out, those that a stored recipe leaves open too. */
export function wholeRecipe(recipe: Recipe, bands: string[]): WholeRecipe {
  const weights = Object.fromEntries(bands.map((band) => [band, recipe.weights?.[band] ?? 1]))
  const closeFieldArcsec = closeFieldOf(recipe)
  return { ...recipe, ...extraLimits(recipe), northUp: recipe.northUp === true, weights, closeFieldArcsec }
}

export const sameRecipe = (a: WholeRecipe, b: WholeRecipe): boolean => canonicalRecipe(a) === canonicalRecipe(b)

/** Which limits draw a view: all bands share theirs. */
export const limitsKeyOf = (view: string): LimitsKey => (bandOfView(view) === null ? (view as LimitsKey) : 'band')

/** Views that these bands can make: those of the recipe in its order, then the others. */
export function possibleViews(recipe: Recipe, bands: string[]): (ViewName & { shown: boolean })[] {
  const all = [...defaultRecipe(bands).views, ...bands.map(bandViewKey)]
  const keys = [...new Set([...recipe.views, ...all])]
  return viewsOf({ ...recipe, views: keys }, bands).map((view) => ({ ...view, shown: recipe.views.includes(view.key) }))
}

/** Shows a view, after all others, or leaves it out; the last one stays. */
export function toggleView(recipe: WholeRecipe, key: string): WholeRecipe {
  const shown = recipe.views.includes(key)
  if (shown && recipe.views.length === 1) return recipe
  return { ...recipe, views: shown ? recipe.views.filter((one) => one !== key) : [...recipe.views, key] }
}

export function moveView(recipe: WholeRecipe, key: string, step: 1 | -1): WholeRecipe {
  const from = recipe.views.indexOf(key)
  const to = from + step
  if (from < 0 || to < 0 || to >= recipe.views.length) return recipe
  const views = [...recipe.views]
  views[from] = views[to]
  views[to] = key
  return { ...recipe, views }
}

export function setLimit(
  recipe: WholeRecipe,
  key: LimitsKey,
  name: keyof AnyLimits,
  value: number | boolean,
): WholeRecipe {
  return { ...recipe, [key]: { ...recipe[key], [name]: value } }
}

const PARTS: { key: keyof WholeRecipe; words: string }[] = [
  { key: 'version', words: 'saturated cores without false colour' },
  { key: 'views', words: 'views' },
  { key: 'colour', words: 'colour' },
  { key: 'deep', words: 'deep' },
  { key: 'residual', words: 'lens removed' },
  { key: 'blue', words: 'blue only' },
  { key: 'core', words: 'bright core' },
  { key: 'band', words: 'bands' },
  { key: 'weights', words: 'weights' },
  { key: 'closeFieldArcsec', words: 'close field' },
  { key: 'northUp', words: 'north up' },
]

/** Names of the parts in which two recipes differ; none for equal ones. */
export function changedParts(before: Recipe, after: Recipe, bands: string[]): string[] {
  const [a, b] = [wholeRecipe(before, bands), wholeRecipe(after, bands)]
  const text = (value: unknown) => canonicalRecipe({ value } as unknown as Recipe)
  return PARTS.filter(({ key }) => text(a[key]) !== text(b[key])).map(({ words }) => words)
}
