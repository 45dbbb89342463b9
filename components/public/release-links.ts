import { releaseFilePath, releasePath } from '@/lib/work/releases/release-address'

/** Of the list of all public releases. These pages use plain links: nothing is fetched ahead, and they work without script. */
export const ALL_RELEASES = '/r'

/** Addresses of a release and of what belongs to it; the secret of a link goes along in each. */
export interface ReleaseLinks {
  all: string
  page(parameters?: URLSearchParams): string
  entry(key: string): string
  entryJson(key: string): string
  stamp(entryKey: string, sha256: string): string
  file(name: string): string
  cone: string
  vosi(document: 'capabilities' | 'availability' | 'tables'): string
  other(number: number): string
  otherEntry(number: number, key: string): string
  key: string | null
}

export function releaseLinks(slug: string, number: number, key: string | null, isPublic = key === null): ReleaseLinks {
  const base = releasePath(slug, number)
  const address = (path: string, parameters = new URLSearchParams()) => {
    const query = new URLSearchParams(parameters)
    if (key !== null) query.set('key', key)
    const text = query.toString()
    return text === '' ? path : `${path}?${text}`
  }
  return {
    // A campaign without a public release has no such page, so that who reads one that is not public stays at it.
    all: isPublic ? `/r/${slug}` : address(base),
    page: (parameters) => address(base, parameters),
    entry: (entryKey) => address(`${base}/${encodeURIComponent(entryKey)}`),
    entryJson: (entryKey) => address(`${base}/${encodeURIComponent(entryKey)}/entry.json`),
    stamp: (entryKey, sha256) => address(`${base}/stamps/${sha256}`, new URLSearchParams({ entry: entryKey })),
    file: (name) => address(releaseFilePath(slug, number, name)),
    cone: address(`${base}/cone`),
    vosi: (document) => address(`${base}/cone/${document}`),
    // Another release has a secret of its own, if any.
    other: (other) => releasePath(slug, other),
    otherEntry: (other, entryKey) => `${releasePath(slug, other)}/${encodeURIComponent(entryKey)}`,
    key,
  }
}
