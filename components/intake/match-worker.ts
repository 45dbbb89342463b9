/** The browser's thread for matching: a manifest of 100,000 lines never holds up the page. */
import { matcher, type MatchWork } from '@/lib/work/intake/match-work'

const match = matcher()

self.onmessage = (event: MessageEvent<{ id: number; work: MatchWork }>) => {
  const { id, work } = event.data
  match(work).then(
    (done) => self.postMessage({ id, done }),
    (error: unknown) => self.postMessage({ id, fault: error instanceof Error ? error.message : String(error) }),
  )
}
