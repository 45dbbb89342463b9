import 'server-only'
import type { JobHandlers } from '@/lib/platform/jobs/run-jobs'

/** Every kind of job and who does it. Rooms add theirs here. */
export const jobHandlers: JobHandlers = {}
