/** The pixels of the last few candidates, decoded. */
import { decodePlanes, type DecodedPlanes } from '@/lib/science/imaging/plane-codec'

const MOST_KEPT = 6

const kept = new Map<string, { loading: Promise<DecodedPlanes>; ready: DecodedPlanes | null }>()

async function unzip({ body }: Response): Promise<Uint8Array> {
  if (!body) return new Uint8Array()
  try {
    const plain = new Response(body.pipeThrough(new DecompressionStream('gzip')))
    return new Uint8Array(await plain.arrayBuffer())
  } catch {
    throw new Error('The pixels did not arrive whole. Load the page again.')
  }
}

async function fetchPlanes(url: string): Promise<DecodedPlanes> {
  let response: Response
  try {
    response = await fetch(url)
  } catch {
    throw new Error('The server cannot be reached.')
  }
  if (!response.ok) {
    const problem = (await response.json().catch(() => null)) as { detail?: unknown } | null
    throw new Error(typeof problem?.detail === 'string' ? problem.detail : `The server answered ${response.status}.`)
  }
  return decodePlanes(await unzip(response))
}

/** Rejects with an Error whose message is a sentence for people; what failed is asked for again the next time. */
export function loadPlanes(url: string): Promise<DecodedPlanes> {
  const found = kept.get(url)
  if (found) {
    kept.delete(url)
    kept.set(url, found)
    return found.loading
  }
  const entry: { loading: Promise<DecodedPlanes>; ready: DecodedPlanes | null } = {
    loading: fetchPlanes(url),
    ready: null,
  }
  kept.set(url, entry)
  entry.loading.then(
    (planes) => (entry.ready = planes),
    () => kept.delete(url),
  )
  for (const oldest of kept.keys()) {
    if (kept.size <= MOST_KEPT) break
    kept.delete(oldest)
  }
  return entry.loading
}

/** What has been loaded already, to be drawn without a frame in between. */
export const readyPlanes = (url: string): DecodedPlanes | null => kept.get(url)?.ready ?? null
