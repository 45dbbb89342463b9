import 'server-only'
import type { Kysely } from 'kysely'
import { findModel, findNewestModel, type StoredModel } from '@/db/queries/estimates'
import type { DB } from '@/db/schema'
import { fromJson } from '@/db/schema/values'
import { readyModel, type ReadyModel } from './lens-estimate'

export interface RunsModel {
  runId: number
  /** version of the rule that the run applied */
  ruleId: number
  model: ReadyModel
}

const MOST_KEPT = 32

/** By the digest of the run's input, from which the model follows: the same in every process, and in every database of a test. */
const kept = new Map<string, ReadyModel>()

/**
 * The model of the campaign's newest run, by which grades are weighed until the next. null before the first run by the reliability
 * method, and where the newest run went by the mean.
 */
export async function newestModel(db: Kysely<DB>, campaignId: number): Promise<RunsModel | null> {
  const run = await findNewestModel(db, campaignId)
  if (!run) return null
  let model = kept.get(run.inputDigest)
  if (!model) {
    const stored = await findModel(db, run.runId)
    if (!stored) return null
    model = keep(run, readyModel(fromJson(stored)))
  }
  return { runId: run.runId, ruleId: run.ruleId, model }
}

function keep({ inputDigest }: StoredModel, model: ReadyModel): ReadyModel {
  if (kept.size >= MOST_KEPT) kept.delete(kept.keys().next().value as string)
  kept.set(inputDigest, model)
  return model
}
