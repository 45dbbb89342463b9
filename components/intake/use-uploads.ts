'use client'

import { useEffect, useSyncExternalStore } from 'react'
import { sendFile } from './send-file'
import { UploadQueue, type UploadState } from './upload-queue'

/** Outside React, so that sending goes on when another page of the campaign is opened. */
const queues = new Map<string, UploadQueue>()

function queueOf(slug: string): UploadQueue {
  const queue = queues.get(slug) ?? new UploadQueue(slug, sendFile)
  queues.set(slug, queue)
  return queue
}

const askBeforeLeaving = (event: BeforeUnloadEvent) => event.preventDefault()

/** Asks before the browser leaves while any campaign's files are under way. Stays on for as long as the page lives. */
function guardLeaving(queue: UploadQueue): void {
  const watch = () => {
    if (queue.getState().active) window.addEventListener('beforeunload', askBeforeLeaving)
    else window.removeEventListener('beforeunload', askBeforeLeaving)
  }
  queue.subscribe(watch)
}

const guarded = new WeakSet<UploadQueue>()

export function useUploads(slug: string): { queue: UploadQueue; state: UploadState } {
  const queue = queueOf(slug)
  useEffect(() => {
    if (guarded.has(queue)) return
    guarded.add(queue)
    guardLeaving(queue)
  }, [queue])
  return { queue, state: useSyncExternalStore(queue.subscribe, queue.getState, queue.getState) }
}
