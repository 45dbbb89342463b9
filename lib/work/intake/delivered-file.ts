import type { FileFate } from '@/db/schema/intake'

/** One delivered file as the intake page and scripts see it. */
export interface DeliveredFile {
  id: number
  name: string
  kind: 'fits' | 'manifest' | 'archive'
  sha256: string
  bytes: number
  fate: FileFate
  fault: string | null
  reason: string | null
  /** The candidate that has its pixels, or that its name tells while it has none; null when unknown. */
  candidate: string | null
  /** null until it is read into a candidate. */
  candidateId: number | null
  bands: string[]
  batch: string
  /** A newer file of the same name is in force. */
  replaced: boolean
  createdAt: string
  updatedAt: string
}

export interface IntakeSummary {
  files: number
  stored: number
  read: number
  imaged: number
  duplicate: number
  refused: number
  candidates: number
  candidatesImaged: number
  /** Files or candidates are waiting for a job, or a job is at work. */
  working: boolean
  /** Of the job at work: files done of those it knows of. */
  progress: { what: 'unpacking' | 'reading'; done: number; total: number } | null
  /** Why work stands still, when a job failed. */
  fault: string | null
  /** Batches of which files wait to be read, or that are paused; the newest first. */
  batches: { id: number; name: string; state: 'open' | 'paused'; waiting: number }[]
}

export interface FilePage {
  files: DeliveredFile[]
  nextCursor: string | null
  summary: IntakeSummary
}
