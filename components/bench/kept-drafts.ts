/**
 * Tags and remarks that were not sent yet, one entry a candidate in localStorage: written at once with each letter, so that
 * nothing typed is lost when the page goes.
 */
import { TAGS, type Tag } from '@/lib/work/grading/tags'
import type { Draft } from './bench-session'

type DraftStorage = Pick<Storage, 'getItem' | 'setItem' | 'removeItem' | 'key' | 'length'>

/** A draft that nobody came back to. */
const KEPT_MS = 14 * 24 * 3_600_000
const MOST_CHARACTERS = 2000

const beginning = (scope: string) => `ringside:draft:${scope}:`

/** Writes what changed between two states of the drafts. A full or forbidden storage keeps them in the page alone. */
export function keepDrafts(
  storage: DraftStorage | null,
  scope: string,
  before: Record<number, Draft>,
  after: Record<number, Draft>,
  now: number,
): void {
  try {
    for (const id of Object.keys(before)) if (!(id in after)) storage?.removeItem(beginning(scope) + id)
    for (const [id, draft] of Object.entries(after)) {
      if (before[Number(id)] !== draft) storage?.setItem(beginning(scope) + id, JSON.stringify({ ...draft, at: now }))
    }
  } catch {
    return
  }
}

export function keptDrafts(storage: DraftStorage | null, scope: string, now: number): Record<number, Draft> {
  const drafts: Record<number, Draft> = {}
  try {
    const keys = Array.from({ length: storage?.length ?? 0 }, (_, index) => storage?.key(index) ?? '')
    for (const key of keys) {
      if (!key.startsWith(beginning(scope))) continue
      const draft = readDraft(storage?.getItem(key) ?? null, now)
      if (draft) drafts[Number(key.slice(beginning(scope).length))] = draft
      else storage?.removeItem(key)
    }
  } catch {
    return drafts
  }
  return drafts
}

function readDraft(text: string | null, now: number): Draft | null {
  try {
    const { tags, remark, at } = JSON.parse(text ?? '') as { tags: unknown; remark: unknown; at: unknown }
    if (typeof at !== 'number' || now - at > KEPT_MS || typeof remark !== 'string' || !Array.isArray(tags)) return null
    return {
      tags: tags.filter((tag): tag is Tag => TAGS.includes(tag as Tag)),
      remark: remark.slice(0, MOST_CHARACTERS),
    }
  } catch {
    return null
  }
}
