import 'server-only'
import { JOB } from '@/lib/platform/jobs/job-kinds'
import type { JobHandlers } from '@/lib/platform/jobs/run-jobs'
import { sendMailJob } from '@/lib/platform/mail/deliver-mail'
import { paintStampsJob } from './calibration/paint-job'
import { consensusJob } from './consensus/consensus-job'
import { unpackArchivesJob } from './intake/archives/unpack-job'
import { makeReleaseJob } from './releases/make-release-job'
import { matchCandidatesJob, matchListJob, readListJob } from './matching/list-jobs'
import { imageCandidatesJob, readFilesJob } from './stamps/imaging-jobs'

const quickJobs: JobHandlers = {
  [JOB.consensus]: consensusJob,
  [JOB.sendMail]: sendMailJob,
}

const longJobs: JobHandlers = {
  [JOB.readFiles]: readFilesJob,
  [JOB.unpackArchives]: unpackArchivesJob,
  [JOB.imageCandidates]: imageCandidatesJob,
  [JOB.paintStamps]: paintStampsJob,
  [JOB.makeRelease]: makeReleaseJob,
}

/** One at a time, so that a list is never read twice at once. */
const matchJobs: JobHandlers = {
  [JOB.readList]: readListJob,
  [JOB.matchList]: matchListJob,
  [JOB.matchCandidates]: matchCandidatesJob,
}

/** Every kind of job and who does it, a loop each entry: verdicts and letters never wait for a long intake. */
export const jobLoops: readonly JobHandlers[] = [quickJobs, longJobs, longJobs, matchJobs]
