/** What the editor of the recipe says to the server. */
import type { Recipe } from '@/lib/science/imaging/recipe'
import type { ChangedRecipe } from '@/lib/work/stamps/change-recipe'
import type { SamplePreview } from '@/lib/work/stamps/preview-recipe'
import type { RecipeProgress } from '@/lib/work/stamps/recipe-versions'

/** A refusal: a sentence, and one for each field that is wrong. */
export class Refused extends Error {
  constructor(
    message: string,
    readonly fields: Record<string, string> = {},
  ) {
    super(message)
  }
}

const root = (slug: string) => `/api/campaigns/${encodeURIComponent(slug)}/recipes`

async function answerOf<T>(request: Promise<Response>): Promise<T> {
  const response = await request.catch((error: unknown) => {
    if (error instanceof DOMException && error.name === 'AbortError') throw error
    throw new Refused('The server cannot be reached. What you changed is still here.')
  })
  const body = (await response.json().catch(() => null)) as
    (T & { detail?: string; invalid_params?: { name: string; reason: string }[] }) | null
  if (response.ok && body) return body
  const fields = (body?.invalid_params ?? []).map(({ name, reason }) => [name, reason])
  throw new Refused(body?.detail ?? `The server answered ${response.status}.`, Object.fromEntries(fields))
}

const json = (body: unknown, signal?: AbortSignal): RequestInit => ({
  method: 'POST',
  headers: { 'content-type': 'application/json' },
  body: JSON.stringify(body),
  signal,
})

export const askPreview = async (slug: string, recipe: Recipe, candidates: number[], signal: AbortSignal) =>
  (await answerOf<{ samples: SamplePreview[] }>(fetch(`${root(slug)}/preview`, json({ recipe, candidates }, signal))))
    .samples

export const askSamples = async (slug: string, count: number, name = '') =>
  (
    await answerOf<{ candidates: { id: number; name: string }[] }>(
      fetch(`${root(slug)}/samples?${new URLSearchParams({ count: String(count), ...(name ? { name } : {}) })}`),
    )
  ).candidates

export const saveRecipe = (slug: string, body: { after: number; recipe: Recipe } | { after: number; again: number }) =>
  answerOf<ChangedRecipe>(fetch(root(slug), json(body)))

export const askProgress = async (slug: string) =>
  (await answerOf<{ progress: RecipeProgress }>(fetch(root(slug), { cache: 'no-store' }))).progress
