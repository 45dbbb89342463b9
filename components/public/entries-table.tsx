import type { ReactNode } from 'react'
import { counted } from '@/components/campaigns/in-words'
import { VoteStrip } from '@/components/ui/vote-strip'
import { formatDeclination, formatRightAscension } from '@/lib/science/sky/coordinates'
import type { EntryRow } from '@/lib/work/releases/read-entry'
import type { ReleaseTable } from '@/lib/work/releases/read-release-page'
import type { TableQuery } from '@/lib/work/releases/table-query'
import type { ReleaseLinks } from './release-links'
import { orderParameters, pageParameters } from './table-parameters'

interface Head {
  order: TableQuery['order']
  label: ReactNode
  /** For who cannot see the unit beside it. */
  about?: string
  className?: string
  /** What a first click asks for. */
  fromHigh?: boolean
}

/** The entries of a release, a page at a time: sorted by links, so that it works without script. */
export function EntriesTable({
  table,
  query,
  links,
  byReliability,
}: {
  table: ReleaseTable
  query: TableQuery
  links: ReleaseLinks
  byReliability: boolean
}) {
  const heads: Head[] = [
    { order: 'designation', label: 'Designation' },
    { order: 'ra', label: 'RA', about: 'Right ascension, ICRS', className: 'max-md:hidden' },
    { order: 'dec', label: 'Dec', about: 'Declination, ICRS', className: 'max-md:hidden' },
    { order: 'class', label: 'Class' },
    byReliability
      ? {
          order: 'probability',
          label: 'Lens p',
          about: 'Lens probability',
          className: 'text-right max-sm:hidden',
          fromHigh: true,
        }
      : {
          order: 'mean',
          label: 'Mean',
          about: 'Mean of grade points',
          className: 'text-right max-sm:hidden',
          fromHigh: true,
        },
    {
      order: 'radius',
      label: (
        <span>
          θ<sub>E</sub>
        </span>
      ),
      about: 'Einstein radius, arcseconds',
      className: 'text-right max-lg:hidden',
      fromHigh: true,
    },
  ]
  const { rows } = table
  const hasLabels = rows.some(({ knownAs }) => knownAs.length > 0)
  const hasRadii = query.order === 'radius' || rows.some(({ einsteinRadiusArcsec: radius }) => radius !== null)
  if (rows.length === 0) {
    return (
      <p className="border-t border-line py-8 text-mute">Nothing passes these filters. Change or clear them above.</p>
    )
  }
  return (
    <div className="relative -mx-5 overflow-x-auto px-5 md:mx-0 md:px-0">
      <table className="w-full border-collapse text-small">
        <caption className="sr-only">
          {counted(table.count, 'entry', 'entries')}, page {table.page} of {table.pages}
        </caption>
        <thead>
          <tr className="border-b border-line text-left text-note text-mute">
            <th scope="col" className="w-12 py-2 pr-3 font-normal">
              <span className="sr-only">Stamp</span>
            </th>
            {heads
              .filter(({ order }) => order !== 'radius' || hasRadii)
              .map((head) => (
                <SortHead key={head.order} head={head} query={query} links={links} sortable={table.sortable} />
              ))}
            <th scope="col" className="px-3 py-2 font-semibold max-sm:hidden">
              Grades
            </th>
            {hasLabels ? (
              <th scope="col" className="py-2 pl-3 font-semibold max-lg:hidden">
                Known as
              </th>
            ) : null}
          </tr>
        </thead>
        <tbody>
          {rows.map((row) => (
            <Row key={row.key} {...{ row, links, byReliability, hasLabels, hasRadii }} />
          ))}
        </tbody>
      </table>
    </div>
  )
}

function SortHead({
  head: { order, label, about, className = '', fromHigh = false },
  query,
  links,
  sortable,
}: {
  head: Head
  query: TableQuery
  links: ReleaseLinks
  sortable: boolean
}) {
  const isHere = query.order === order && sortable
  const sorted = isHere ? (query.descending ? 'descending' : 'ascending') : undefined
  const descending = isHere ? !query.descending : fromHigh
  return (
    <th scope="col" aria-sort={sorted} className={`px-3 py-2 font-semibold whitespace-nowrap ${className}`}>
      {sortable ? (
        <a
          href={`${links.page(orderParameters(query, order, descending))}#entries`}
          title={about}
          className={`inline-flex min-h-6 items-center gap-1 underline-offset-4 hover:underline ${isHere ? 'text-text' : ''}`}
        >
          {label}
          <span aria-hidden="true">{sorted ? (sorted === 'descending' ? '▾' : '▴') : ''}</span>
        </a>
      ) : (
        <abbr title={about} className="no-underline">
          {label}
        </abbr>
      )}
    </th>
  )
}

function Row({
  row,
  links,
  byReliability,
  hasLabels,
  hasRadii,
}: {
  row: EntryRow
  links: ReleaseLinks
  byReliability: boolean
  hasLabels: boolean
  hasRadii: boolean
}) {
  const href = links.entry(row.key)
  const ra = formatRightAscension(row.raDeg)
  const dec = formatDeclination(row.decDeg)
  const worth = byReliability ? row.probability?.toFixed(3) : row.mean?.toFixed(2)
  return (
    <tr className="border-b border-line">
      <td className="py-1.5 pr-3">
        <span className="block size-10 overflow-hidden bg-black">
          {row.thumbnail ? (
            <img
              src={links.stamp(row.key, row.thumbnail)}
              alt=""
              width={40}
              height={40}
              loading="lazy"
              decoding="async"
              className="pixelated size-10 object-contain"
            />
          ) : null}
        </span>
      </td>
      <th scope="row" className="px-3 py-1.5 text-left font-normal">
        <a
          href={href}
          className="figures inline-flex min-h-6 items-center font-semibold underline decoration-line underline-offset-4 hover:decoration-text [overflow-wrap:anywhere]"
        >
          {row.designation}
        </a>
        <span className="figures block text-note text-mute md:hidden">
          {ra} {dec}
        </span>
      </th>
      <td className="figures px-3 py-1.5 whitespace-nowrap text-mute max-md:hidden">{ra}</td>
      <td className="figures px-3 py-1.5 whitespace-nowrap text-mute max-md:hidden">{dec}</td>
      <td className="figures px-3 py-1.5 font-semibold">{row.class ?? '–'}</td>
      <td className="figures px-3 py-1.5 text-right max-sm:hidden">{worth ?? '–'}</td>
      {hasRadii ? (
        <td className="figures px-3 py-1.5 text-right max-lg:hidden">
          {row.einsteinRadiusArcsec === null ? '–' : radiusInWords(row)}
        </td>
      ) : null}
      <td className="px-3 py-1.5 max-sm:hidden">
        <VoteStrip votes={row.votes} dense />
      </td>
      {hasLabels ? (
        <td className="max-w-52 py-1.5 pl-3 text-note max-lg:hidden">
          {row.knownAs.map(({ name }) => name).join(', ') || <span className="text-mute">–</span>}
        </td>
      ) : null}
    </tr>
  )
}

const radiusInWords = ({ einsteinRadiusArcsec: radius, einsteinRadiusErrorArcsec: error }: EntryRow): string =>
  `${(radius ?? 0).toFixed(2)}${error === null ? '' : ` ± ${error.toFixed(2)}`}″`

/** Links to the other pages, each with its place in words. */
export function TablePages({ table, query, links }: { table: ReleaseTable; query: TableQuery; links: ReleaseLinks }) {
  if (table.pages === 1) return null
  const to = (page: number) => `${links.page(pageParameters(query, page))}#entries`
  const shape = 'inline-flex min-h-9 items-center rounded-control border border-edge/50 bg-raise px-3 hover:border-edge'
  const { page, pages } = table
  return (
    <nav aria-label="Pages of entries" className="flex flex-wrap items-center gap-2 text-small">
      {page > 2 ? (
        <a href={to(1)} className={shape}>
          First
        </a>
      ) : null}
      {page > 1 ? (
        <a href={to(page - 1)} rel="prev" className={shape}>
          Before
        </a>
      ) : null}
      <span className="figures px-2 text-mute">
        page {page} of {pages}
      </span>
      {page < pages ? (
        <a href={to(page + 1)} rel="next" className={shape}>
          Next
        </a>
      ) : null}
      {page < pages - 1 ? (
        <a href={to(pages)} className={shape}>
          Last
        </a>
      ) : null}
    </nav>
  )
}
