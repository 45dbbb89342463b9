import { ARCHIVE } from '@/db/queries/releases'
import { CHECKSUMS, RELEASE_FILES, STAMPS } from './release-files'

const OTHERS: Record<string, string> = {
  [ARCHIVE]: 'every file but stamps.zip in one archive; npm run reproduce recomputes its verdicts',
  [STAMPS.name]: 'the pictures of the entries, a folder each by designation; README.txt has its SHA-256',
  [CHECKSUMS.name]: 'SHA-256 of every file of the archive, for sha256sum -c',
}

/** What a file of a release is, in a few words; empty for one that is not known. */
export const releaseFileAbout = (name: string): string =>
  RELEASE_FILES.find((file) => file.name === name)?.about ?? OTHERS[name] ?? ''
