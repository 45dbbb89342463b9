import 'server-only'
import type { Kysely } from 'kysely'
import { listKnownTruths, setTruths, type KnownTruth } from '@/db/queries/told-truths'
import type { DB } from '@/db/schema'
import { requestConsensus } from '@/lib/platform/jobs/request-consensus'
import { inWords, type Truth } from './told-truth'

export interface ToldTruth {
  name: string
  /** null where no manifest in force says what it is. */
  truth: Truth | null
  explanation: string | null
}

export interface TruthRefused {
  name: string
  sentence: string
}

/**
 * Makes candidates calibration stamps where manifests tell what they are, and ordinary candidates where none does any more, both only
 * as long as nobody has worked with them: grades given to a candidate are no measure of graders, and of a stamp that somebody has
 * practised on the answer is known. What cannot be is returned in words and stays as it is. Stamps that were made here keep their
 * truth. Call it in a transaction.
 */
export async function tellTruths(
  db: Kysely<DB>,
  campaignId: number,
  told: readonly ToldTruth[],
): Promise<TruthRefused[]> {
  const byName = new Map(told.map((one) => [one.name, one]))
  const refused: TruthRefused[] = []
  const changes = new Map<string, { truth: Truth | null; explanation: string | null; ids: number[] }>()
  let corrected = false
  for (const known of await listKnownTruths(db, campaignId, [...byName.keys()])) {
    const { truth, explanation: text } = byName.get(known.name) as ToldTruth
    const explanation = truth === null ? null : text
    const asItIs = truth === known.truth && (known.made === 1 || explanation === known.explanation)
    if (asItIs || (known.made && truth === null)) continue
    const sentence = whyNot(known, truth)
    if (sentence) {
      refused.push({ name: known.name, sentence })
      continue
    }
    if (known.grades && truth !== known.truth) corrected = true
    const key = JSON.stringify([truth, explanation])
    const change = changes.get(key) ?? { truth, explanation, ids: [] }
    change.ids.push(known.id)
    changes.set(key, change)
  }
  for (const { ids, ...change } of changes.values()) await setTruths(db, campaignId, ids, change)
  // Reliabilities are learned from stamps too.
  if (corrected) await requestConsensus(db, campaignId)
  return refused
}

function whyNot({ name, truth: now, made, grades, looks, judged }: KnownTruth, then: Truth | null): string | null {
  if (made) {
    return `${name} is a calibration stamp that was made here, ${inWords(now as Truth)}, and stays what it is. Give the delivered one another name.`
  }
  if (now !== null && then !== null) return null
  const why = grades
    ? 'has been graded'
    : judged
      ? 'has been decided on'
      : looks
        ? 'has been looked at, in the first pass, in practice or for a lead,'
        : null
  if (why === null) return null
  return then === null
    ? `${name} is a calibration stamp and ${why} as one, so it stays one although no manifest calls it that any more.`
    : `${name} ${why} as an ordinary candidate, so it stays one and does not become a calibration stamp. Deliver it again under another name to use it as one.`
}
