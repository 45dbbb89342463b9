import { counted, day } from '@/components/campaigns/in-words'
import { GRADE_CLASS_RULE, GRADE_MEANINGS } from '@/lib/work/catalogue/grade-class'
import type { ReleaseContents, ReleaseHead, ReleaseTable } from '@/lib/work/releases/read-release-page'
import type { ReleaseSky } from '@/lib/work/releases/release-sky'
import type { TableQuery } from '@/lib/work/releases/table-query'
import { Downloads } from './downloads'
import { EntriesFilter } from './entries-filter'
import { EntriesTable, TablePages } from './entries-table'
import { MachineAccess } from './machine-access'
import { PublicFrame } from './public-frame'
import { ReleaseChanges } from './release-changes'
import type { ReleaseLinks } from './release-links'
import { ReleaseNotices } from './release-notices'
import { SkySection } from './sky-section'
import { isNarrowed } from './table-parameters'

const KIND = { release: 'Release', erratum: 'Erratum, release', retraction: 'Retraction, release' }

interface ReleasePageProps {
  head: ReleaseHead
  contents: ReleaseContents
  sky: ReleaseSky
  table: ReleaseTable
  query: TableQuery
  links: ReleaseLinks
  addresses: { release: string; cone: string; newestCone: string; capabilities: string; json: string }
}

/** The public page of a release. Nothing of it needs a script. */
export function ReleasePage({ head, contents, sky, table, query, links, addresses }: ReleasePageProps) {
  const first = table.rows[0]
  return (
    <PublicFrame place={`${head.survey} · ${head.campaign}`} href={links.all}>
      <header className="flex flex-col gap-3">
        <p className="text-small text-mute">
          {KIND[head.kind]} {head.number}, {day(head.frozenAt)}. {head.authors.slice(0, 8).join('; ')}
          {head.authors.length > 8 ? ` and ${head.authors.length - 8} more` : ''}
        </p>
        <h1 className="max-w-4xl text-display font-semibold text-balance">{head.title}</h1>
        <ReleaseNotices head={head} links={links} />
      </header>
      <div className="grid gap-x-12 gap-y-8 lg:grid-cols-[minmax(0,1fr)_minmax(0,31rem)]">
        <div className="flex flex-col gap-5">
          <p className="max-w-2xl whitespace-pre-line">{head.description}</p>
          <div className="flex max-w-2xl flex-col gap-1.5 border-l-4 border-lamp pl-4 text-small">
            {head.cautions.map((caution) => (
              <p key={caution}>{caution}</p>
            ))}
          </div>
          <Counts head={head} classes={contents.classes} />
          <p className="max-w-2xl text-small text-mute">{head.rule}</p>
          <p className="max-w-2xl text-small text-mute">
            Class: {GRADE_CLASS_RULE}. {GRADE_MEANINGS}
          </p>
        </div>
        <SkySection sky={sky} links={links} />
      </div>
      {head.entries === 0 ? null : (
        <section aria-labelledby="entries" className="flex flex-col gap-4">
          <h2 id="entries" className="scroll-mt-4 text-title font-semibold">
            {isNarrowed(query)
              ? `${counted(table.count, 'entry', 'entries')} of ${head.entries.toLocaleString('en')}`
              : counted(head.entries, 'entry', 'entries')}
          </h2>
          <EntriesFilter query={query} links={links} sortable={table.sortable} />
          {table.problems.map((problem) => (
            <p
              key={problem}
              role="alert"
              className="rounded-control border-l-4 border-alarm bg-raise px-4 py-2 text-small"
            >
              {problem}
            </p>
          ))}
          {query.order === 'catalogue' ? (
            <p className="text-note text-mute">In the order in which the campaign took them in, as in the files.</p>
          ) : null}
          <EntriesTable table={table} query={query} links={links} byReliability={head.method === 'reliability'} />
          <TablePages table={table} query={query} links={links} />
        </section>
      )}
      <Downloads files={contents.files} links={links} />
      <div className="grid gap-x-12 gap-y-10 lg:grid-cols-2">
        <Cite head={head} links={links} address={addresses.release} />
        <div className="min-w-0">
          <MachineAccess
            addresses={addresses}
            sample={first ? { raDeg: first.raDeg, decDeg: first.decDeg } : null}
            isPublic={head.access === 'public'}
          />
        </div>
      </div>
      {head.kind === 'retraction' ? null : <ReleaseChanges contents={contents} links={links} />}
    </PublicFrame>
  )
}

function Counts({ head, classes }: { head: ReleaseHead; classes: ReleaseContents['classes'] }) {
  if (head.kind === 'retraction') return null
  const parts = classes.map(({ class: name, count }) => ({ name: name === 'none' ? 'without class' : name, count }))
  return (
    <dl className="flex flex-wrap gap-x-8 gap-y-3">
      <div>
        <dd className="figures text-title font-semibold">{head.entries.toLocaleString('en')}</dd>
        <dt className="text-note text-mute">
          {head.entries === 1 ? 'entry' : 'entries'} of {head.candidates.toLocaleString('en')} judged
        </dt>
      </div>
      {parts.map(({ name, count }) => (
        <div key={name}>
          <dd className="figures text-title font-semibold">{count.toLocaleString('en')}</dd>
          <dt className="text-note text-mute">{name.length === 1 ? `class ${name}` : name}</dt>
        </div>
      ))}
    </dl>
  )
}

function Cite({ head, links, address }: { head: ReleaseHead; links: ReleaseLinks; address: string }) {
  const { licence } = head
  return (
    <section aria-labelledby="cite" className="flex flex-col gap-3">
      <h2 id="cite" className="text-title font-semibold">
        How to cite
      </h2>
      <blockquote className="max-w-2xl border-l-4 border-edge pl-4">{head.howToCite}</blockquote>
      <p className="text-small">
        <span className="figures break-all">{address}</span>
      </p>
      <p className="text-small text-mute">
        Licence:{' '}
        {licence.url ? (
          <a href={licence.url} rel="license" className="underline underline-offset-4">
            {licence.name}
          </a>
        ) : (
          <span className="whitespace-pre-line">{licence.name}</span>
        )}
        . Published by {head.publisher}, {head.year}. Made with {head.software}.
      </p>
      <p className="flex flex-wrap gap-x-5 text-small">
        {['CITATION.cff', 'datacite.json'].map((name) => (
          <a
            key={name}
            href={links.file(name)}
            download
            className="inline-flex min-h-6 items-center underline underline-offset-4"
          >
            {name}
          </a>
        ))}
      </p>
    </section>
  )
}
