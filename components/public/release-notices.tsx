import type { ReactNode } from 'react'
import type { ReleaseHead } from '@/lib/work/releases/read-release-page'
import type { ReleaseLinks } from './release-links'

function Said({ tone, children }: { tone: 'alarm' | 'split' | 'edge'; children: ReactNode }) {
  const edge = { alarm: 'border-alarm', split: 'border-split', edge: 'border-edge' }[tone]
  return <p className={`max-w-3xl rounded-control border-l-4 ${edge} bg-raise px-4 py-3 text-small`}>{children}</p>
}

const link = 'font-semibold underline underline-offset-4'

/** What a reader must know of a release before anything else: on its page and on the page of each of its entries. */
export function ReleaseNotices({ head, links }: { head: ReleaseHead; links: ReleaseLinks }) {
  const { notices, corrects, kind, newest, access } = head
  const isWithdrawn = notices.some((notice) => notice.kind === 'retraction')
  return (
    <div className="flex flex-col gap-2 empty:hidden">
      {notices.map((notice) => (
        <Said key={notice.number} tone={notice.kind === 'retraction' ? 'alarm' : 'split'}>
          <strong>
            {notice.kind === 'retraction' ? 'This release is withdrawn.' : 'This release has an erratum.'}
          </strong>{' '}
          {notice.isOpen ? (
            <a href={links.other(notice.number)} className={link}>
              Release {notice.number}
            </a>
          ) : (
            `Release ${notice.number}, which is not open yet,`
          )}{' '}
          says why: {notice.statement}
          {notice.isWithdrawn ? ` Release ${notice.number} was withdrawn in its turn: do not use it either.` : ''}
        </Said>
      ))}
      {corrects ? (
        <Said tone="edge">
          <strong>{kind === 'retraction' ? 'This withdraws' : 'This is an erratum of'}</strong>{' '}
          <a href={links.other(corrects.number)} className={link}>
            release {corrects.number}
          </a>
          : {corrects.statement}
        </Said>
      ) : null}
      {newest !== null && !isWithdrawn && newest > head.number && !notices.some(({ number }) => number === newest) ? (
        <Said tone="edge">
          A newer release stands:{' '}
          <a href={links.other(newest)} className={link}>
            release {newest}
          </a>
          . This one stays as it is.
        </Said>
      ) : null}
      {newest !== null && isWithdrawn ? (
        <Said tone="edge">
          What stands is{' '}
          <a href={links.other(newest)} className={link}>
            release {newest}
          </a>
          .
        </Said>
      ) : null}
      {access === 'private' ? (
        <Said tone="edge">This release is private: leads and viewers of its campaign read this page, nobody else.</Said>
      ) : null}
      {access === 'link' ? (
        <Said tone="edge">
          This release is open to whoever has its link, and not public. Pass the link on only to people who are meant to
          have it.
        </Said>
      ) : null}
    </div>
  )
}
