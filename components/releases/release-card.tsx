import Link from 'next/link'
import { counted, day } from '@/components/campaigns/in-words'
import { fileSize } from '@/components/intake/file-size'
import { CopyText } from '@/components/table/copy-text'
import { ButtonLink } from '@/components/ui/button'
import { Notice } from '@/components/ui/notice'
import { AccessForm } from './access-form'
import { MakingProgress } from './making-progress'
import type { ShownRelease } from './releases-screen'
import { ACCESS_IN_WORDS, KIND_IN_WORDS, noticeInWords } from './words'

const MAIN_FILES = ['RELEASE.zip', 'stamps.zip', 'catalogue.csv', 'catalogue.vot']
/** Of a retraction: what tells why. */
const STATEMENT_FILES = ['README.txt', 'RELEASE.zip']

export function ReleaseCard({
  slug,
  acronym,
  release,
  mayChange,
  isBusy,
}: {
  slug: string
  acronym: string
  release: ShownRelease
  mayChange: boolean
  /** Whether the files of some release are being made, so that the next has to wait. */
  isBusy: boolean
}) {
  const { number, kind, making, notices } = release
  const id = `release-${number}`
  const isWithdrawn = notices.some((notice) => notice.kind === 'retraction')
  const corrected = `/campaigns/${slug}/releases/new?of=${number}`
  return (
    <li aria-labelledby={id} className="flex flex-col gap-4 border-t border-line pt-6">
      <header className="flex flex-wrap items-baseline gap-x-6 gap-y-1">
        <h2 id={id} className="text-title font-semibold text-balance">
          {KIND_IN_WORDS[kind]} {number}: {release.title}
        </h2>
        <p className="ml-auto text-small font-semibold">{ACCESS_IN_WORDS[release.access].label}</p>
      </header>
      <p className="text-small text-mute">
        Frozen {day(release.frozenAt)}
        {kind === 'retraction'
          ? `. Withdraws release ${release.corrects}: ${release.statement}`
          : `. ${counted(release.entries, 'entry', 'entries')} of ${counted(release.candidates, 'judged candidate')}.`}
        {kind === 'erratum' ? ` Corrects release ${release.corrects}: ${release.statement}` : ''}
      </p>
      {notices.map((notice) => (
        <Notice key={notice.number} tone="note">
          <span className="font-semibold">{noticeInWords(notice)}.</span> {notice.statement}
        </Notice>
      ))}
      {release.givenUp !== null ? (
        <Notice tone="note">
          <span className="font-semibold">Given up: its files could not be made.</span> {release.givenUp}
        </Notice>
      ) : making ? (
        <MakingProgress
          number={number}
          making={making}
          again={mayChange ? release.againAction : null}
          giveUp={mayChange ? release.giveUpAction : null}
        />
      ) : (
        <>
          <Files slug={slug} release={release} />
          {mayChange ? (
            <AccessForm
              number={number}
              acronym={acronym}
              access={release.access}
              asksForAcronym={release.entries > 0}
              action={release.accessAction}
            />
          ) : null}
          <div className="flex flex-wrap gap-x-5 gap-y-2 text-small">
            <Link prefetch={false} href={release.path} className="underline underline-offset-4">
              Its page
            </Link>
            {mayChange && !isBusy && kind !== 'retraction' && !isWithdrawn ? (
              <>
                <Link
                  href={`${corrected}&kind=erratum`}
                  className="text-mute underline underline-offset-4 hover:text-text"
                >
                  Correct it by an erratum
                </Link>
                <Link
                  href={`${corrected}&kind=retraction`}
                  className="text-mute underline underline-offset-4 hover:text-text"
                >
                  Withdraw it
                </Link>
              </>
            ) : null}
          </div>
        </>
      )}
    </li>
  )
}

function Files({ slug, release: { number, kind, files } }: { slug: string; release: ShownRelease }) {
  const href = (name: string) => `/api/campaigns/${slug}/releases/${number}/files/${encodeURIComponent(name)}`
  const main = (kind === 'retraction' ? STATEMENT_FILES : MAIN_FILES).flatMap(
    (name) => files.find((file) => file.name === name) ?? [],
  )
  return (
    <div className="flex flex-col gap-3">
      <div className="flex flex-wrap gap-2">
        {main.map(({ name, bytes }) => (
          <ButtonLink key={name} prefetch={false} download href={href(name)}>
            {name} <span className="figures font-normal text-mute">{fileSize(bytes)}</span>
          </ButtonLink>
        ))}
      </div>
      <details className="text-small">
        <summary className="min-h-6">All {counted(files.length, 'file')}, with their SHA-256</summary>
        <ul className="mt-2 flex flex-col divide-y divide-line">
          {files.map(({ name, bytes, sha256 }) => (
            <li key={name} className="grid gap-x-4 py-1.5 md:grid-cols-[13rem_6rem_minmax(0,1fr)]">
              <a href={href(name)} download className="inline-flex min-h-6 items-center underline underline-offset-4">
                {name}
              </a>
              <span className="figures text-mute">{fileSize(bytes)}</span>
              <span className="figures min-w-0 text-note break-all text-mute">
                <CopyText text={sha256} what={`SHA-256 of ${name}`} />
              </span>
            </li>
          ))}
        </ul>
      </details>
    </div>
  )
}
