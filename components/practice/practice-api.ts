import type { GradeLetter } from '@/db/schema/grading'
import type { PracticeState, PracticeTruth } from '@/lib/work/calibration/practice'
import type { PERSON_HEADER } from '@/lib/work/people/person-header'

/** Typed by the server's constant, so that the two cannot differ. */
const HEADER: typeof PERSON_HEADER = 'ringside-person'

const root = (slug: string) => `/api/campaigns/${encodeURIComponent(slug)}/practice`

async function read<T>(response: Response): Promise<T> {
  const body = (await response.json().catch(() => null)) as (T & { detail?: string }) | null
  if (response.ok && body !== null) return body
  throw new Error(body?.detail ?? `The server answered ${response.status}. Try again.`)
}

async function ask<T>(address: string, init?: RequestInit): Promise<T> {
  let response: Response
  try {
    response = await fetch(address, init)
  } catch {
    throw new Error('The server cannot be reached. Nothing is lost; try again.')
  }
  return read<T>(response)
}

/** Somebody else who has signed in beside it is told nothing here. */
export const fetchPractice = ({ slug, personId }: { slug: string; personId: number }): Promise<PracticeState> =>
  ask(root(slug), { cache: 'no-store', headers: { [HEADER]: String(personId) } })

export const sendAnswer = (
  { slug, personId }: { slug: string; personId: number },
  candidateId: number,
  answer: { id: string; grade: GradeLetter; seconds: number },
): Promise<PracticeTruth> =>
  ask(`${root(slug)}/${candidateId}`, {
    method: 'PUT',
    headers: { 'content-type': 'application/json', [HEADER]: String(personId) },
    body: JSON.stringify(answer),
  })
