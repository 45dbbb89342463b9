import type { CalibrationPage, Galaxy } from '@/lib/work/calibration/calibration-page'
import type { GalaxyFilter } from '@/lib/work/calibration/galaxy-filters'
import type { OrderInput, PreviewInput } from '@/lib/work/calibration/painting-input'
import type { PaintedSample } from '@/lib/work/calibration/preview-painting'

const root = (slug: string) => `/api/campaigns/${encodeURIComponent(slug)}/calibration`

/** A refusal with the sentences by field. */
export class Refused extends Error {
  constructor(
    message: string,
    readonly fields: Record<string, string>,
  ) {
    super(message)
  }
}

async function ask<T>(address: string, body?: unknown, signal?: AbortSignal): Promise<T> {
  const init = body === undefined ? { signal } : post(body, signal)
  const response = await fetch(address, init)
  const answer = (await response.json().catch(() => null)) as
    (T & { detail?: string; invalid_params?: { name: string; reason: string }[] }) | null
  if (response.ok && answer !== null) return answer
  const fields = Object.fromEntries((answer?.invalid_params ?? []).map(({ name, reason }) => [name, reason]))
  throw new Refused(answer?.detail ?? `The server answered ${response.status}. Try again.`, fields)
}

const post = (body: unknown, signal?: AbortSignal): RequestInit => ({
  method: 'POST',
  headers: { 'content-type': 'application/json' },
  body: JSON.stringify(body),
  signal,
})

export const askPreview = (slug: string, input: PreviewInput, signal: AbortSignal) =>
  ask<{ samples: PaintedSample[] }>(`${root(slug)}/preview`, input, signal)

export const askGalaxies = (slug: string, which: GalaxyFilter, name: string) =>
  ask<{ galaxies: Galaxy[] }>(`${root(slug)}/galaxies?${new URLSearchParams({ which, name })}`)

export const sendOrder = (slug: string, input: OrderInput) => ask<{ order: string }>(root(slug), input)

export const askPage = (slug: string) => ask<CalibrationPage>(root(slug))
