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

/** By run and the digest of its input: a run keeps its model for good, and the digest tells the databases of tests apart. */
const kept = new Map<string, ReadyModel>()

/**
 * The model of the campaign's newest run, by which grades are weighed until the next. null before the first run by the reliability
 * method, and where the newest run went by the mean.
 */
export async function newestModel(db: Kysely<DB>, campaignId: number): Promise<RunsModel | null> {
  const run = await findNewestModel(db, campaignId)
  if (!run) return null
  let model = kept.get(keyOf(run))
  if (!model) {
    const stored = await findModel(db, run.runId)
    if (!stored) return null
    model = keep(run, readyModel(fromJson(stored)))
  }
  return { runId: run.runId, ruleId: run.ruleId, model }
}

const keyOf = ({ runId, inputDigest }: StoredModel) => `${runId} ${inputDigest}`

function keep(run: StoredModel, model: ReadyModel): ReadyModel {
  if (kept.size >= MOST_KEPT) kept.delete(kept.keys().next().value as string)
  kept.set(keyOf(run), model)
  return model
}
