import 'server-only'
import { z } from 'zod'
import type { JobHandler } from '@/lib/platform/jobs/run-jobs'
import { runConsensusByItself } from './run-consensus'

const Payload = z.object({ campaignId: z.int().positive() })

/** Handler of jobs of kind `JOB.consensus`. Idempotent, because a run without new input writes nothing. */
export const consensusJob: JobHandler = async ({ db, payload }) => {
  await runConsensusByItself(db, Payload.parse(payload).campaignId)
}
