import type { LookedUp } from '@/lib/work/intake/look-up-files'

const NAMES_PER_REQUEST = 5000

/** What the server has under these names, in their order. @throws Error with a sentence where it cannot be asked. */
export async function lookUp(slug: string, names: readonly string[]): Promise<LookedUp> {
  const answer: LookedUp = { files: [], told: [] }
  for (let start = 0; start < names.length; start += NAMES_PER_REQUEST) {
    const look = names.slice(start, start + NAMES_PER_REQUEST).map((name) => ({ name }))
    const response = await fetch(`/api/campaigns/${slug}/files`, {
      method: 'POST',
      headers: { 'content-type': 'application/json' },
      body: JSON.stringify({ look }),
    }).catch(() => null)
    if (!response?.ok) throw new Error('The server could not be asked what it has already.')
    const part = (await response.json()) as LookedUp
    answer.files.push(...part.files)
    answer.told.push(...part.told)
  }
  return answer
}
