import 'server-only'
import { JOB } from '@/lib/platform/jobs/job-kinds'
import type { JobHandlers } from '@/lib/platform/jobs/run-jobs'
import { sendMailJob } from '@/lib/platform/mail/deliver-mail'
import { consensusJob } from './consensus/consensus-job'
import { unpackArchivesJob } from './intake/archives/unpack-job'
import { imageCandidatesJob, readFilesJob } from './stamps/imaging-jobs'

/** Every kind of job and who does it. Rooms add theirs here. */
export const jobHandlers: JobHandlers = {
  [JOB.readFiles]: readFilesJob,
  [JOB.unpackArchives]: unpackArchivesJob,
  [JOB.imageCandidates]: imageCandidatesJob,
  [JOB.consensus]: consensusJob,
  [JOB.sendMail]: sendMailJob,
}
