import type { ListMapping } from '@/db/schema/matching'
import type { KnownPage } from '@/lib/work/matching/known-page'
import type { ListLook } from '@/lib/work/matching/read-list'

const root = (slug: string) => `/api/campaigns/${encodeURIComponent(slug)}/known`

async function answerOf<T>(response: Response): Promise<T> {
  const answer = (await response.json().catch(() => null)) as (T & { detail?: string }) | null
  if (response.ok && answer !== null) return answer
  throw new Error(answer?.detail ?? `The server answered ${response.status}. Try again.`)
}

export const askKnown = async (slug: string): Promise<KnownPage> => answerOf(await fetch(root(slug)))

export async function sendList(slug: string, file: File): Promise<{ id: number; isNew: boolean }> {
  const response = await fetch(`${root(slug)}?${new URLSearchParams({ name: file.name })}`, {
    method: 'POST',
    body: file,
  }).catch(() => null)
  if (!response) throw new Error('The file did not arrive: the server cannot be reached. Choose it again.')
  return answerOf(response)
}

export async function askLook(
  slug: string,
  listId: number,
  mapping: ListMapping,
  signal: AbortSignal,
): Promise<ListLook> {
  const response = await fetch(`${root(slug)}/${listId}/look`, {
    method: 'POST',
    headers: { 'content-type': 'application/json' },
    body: JSON.stringify({ mapping }),
    signal,
  })
  return answerOf(response)
}
