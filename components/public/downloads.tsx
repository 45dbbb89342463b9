import { fileSize } from '@/components/intake/file-size'
import type { ReleaseContents } from '@/lib/work/releases/read-release-page'
import type { ReleaseLinks } from './release-links'

const FIRST = ['RELEASE.zip', 'catalogue.csv', 'catalogue.vot', 'stamps.zip']

/** Every file with its size and hash; what most people come for first. */
export function Downloads({ files, links }: { files: ReleaseContents['files']; links: ReleaseLinks }) {
  const place = (name: string) => (FIRST.indexOf(name) + FIRST.length + 1) % (FIRST.length + 1)
  const first = FIRST.flatMap((name) => files.find((file) => file.name === name) ?? [])
  const rest = files.filter(({ name }) => place(name) === FIRST.length)
  return (
    <section aria-labelledby="downloads" className="flex flex-col gap-3">
      <h2 id="downloads" className="text-title font-semibold">
        Downloads
      </h2>
      <FileList files={first} links={links} />
      {rest.length ? (
        <details className="text-small">
          <summary className="inline-flex min-h-9 items-center">The other {rest.length} files</summary>
          <FileList files={rest} links={links} />
        </details>
      ) : null}
      <p className="text-note text-mute">
        The code under each name is its SHA-256. <code className="figures">sha256sum -c SHA256SUMS</code>, with the
        files beside it under their names here, checks all but the two archives: RELEASE.zip holds SHA256SUMS, and
        README.txt has the SHA-256 of stamps.zip. Files never change.
      </p>
    </section>
  )
}

function FileList({ files, links }: { files: ReleaseContents['files']; links: ReleaseLinks }) {
  return (
    <ul className="flex flex-col divide-y divide-line border-y border-line text-small">
      {files.map(({ name, about, bytes, sha256, mediaType }) => (
        <li key={name} className="grid gap-x-6 py-2 sm:grid-cols-[minmax(0,14rem)_5.5rem_minmax(0,1fr)]">
          <a
            href={links.file(name)}
            type={mediaType}
            download
            className="inline-flex min-h-6 items-center font-semibold underline decoration-edge underline-offset-4 hover:decoration-text"
          >
            {name}
          </a>
          <span className="figures text-mute sm:text-right">{fileSize(bytes)}</span>
          <span className="min-w-0">
            {about}
            <code className="figures block text-note break-all text-mute">{sha256}</code>
          </span>
        </li>
      ))}
    </ul>
  )
}
