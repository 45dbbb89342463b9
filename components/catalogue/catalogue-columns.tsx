import Link from 'next/link'
import { CopyButton, CopyText } from '@/components/table/copy-text'
import { StampThumbnail } from '@/components/table/stamp-thumbnail'
import type { TableColumn } from '@/components/table/table-column'
import type { TableSort } from '@/components/table/table-state'
import { VoteStrip } from '@/components/ui/vote-strip'
import { probabilityBeside } from '@/lib/science/agreement/weight-words'
import { formatDeclination, formatRightAscension } from '@/lib/science/sky/coordinates'
import type { CatalogueTableRow } from '@/lib/work/catalogue/catalogue-table'

export interface CatalogueRow extends CatalogueTableRow {
  /** The page of the candidate with its evidence. */
  href: string
}

/** The surest first. */
export const CATALOGUE_SORT: TableSort = { id: 'mean', descending: true }

const gradesOf = ({ votes }: CatalogueRow) => votes.A + votes.B + votes.C + votes.N
const none = <span className="text-mute">–</span>
const figure = (value: number | null, decimals: number) => (value === null ? none : value.toFixed(decimals))

export const CATALOGUE_COLUMNS: readonly TableColumn<CatalogueRow>[] = [
  {
    id: 'designation',
    label: 'Designation',
    title: 'Designation and name',
    value: (row) => (row.designation ? `${row.designation} ${row.name}` : row.name),
    filter: 'text',
    sortable: true,
    pinned: true,
    cell: (row) => (
      <span className="flex items-center gap-1.5">
        <StampThumbnail src={row.thumbnail} name={row.name} />
        <Link
          href={row.href}
          prefetch={false}
          className="figures text-note text-text underline decoration-line underline-offset-4 hover:decoration-text"
        >
          {row.designation ?? row.name}
        </Link>
        {row.designation ? <CopyButton text={row.designation} what="designation" /> : null}
      </span>
    ),
  },
  {
    id: 'class',
    label: 'Class',
    title: 'Grade class',
    value: (row) => row.gradeClass ?? undefined,
    filter: ['A', 'B', 'C'],
    sortable: true,
    cell: (row) => (row.gradeClass ? <b className={CLASS_TONE[row.gradeClass]}>{row.gradeClass}</b> : none),
  },
  {
    id: 'mean',
    label: 'Mean',
    title: 'Mean grade, points',
    value: (row) => row.mean ?? undefined,
    filter: 'range',
    sortable: true,
    largestFirst: true,
    numeric: true,
    cell: (row) => figure(row.mean, 2),
  },
  {
    id: 'spread',
    label: 'Spread',
    title: 'Spread, points',
    value: (row) => row.spread ?? undefined,
    filter: 'range',
    sortable: true,
    largestFirst: true,
    numeric: true,
    cell: (row) => figure(row.spread, 2),
  },
  {
    id: 'probability',
    label: 'Lens p',
    title: 'Lens probability',
    value: (row) => row.probability ?? undefined,
    filter: 'range',
    sortable: true,
    largestFirst: true,
    numeric: true,
    hidden: true,
    cell: (row) => (row.probability === null ? none : probabilityBeside(row.probability)),
  },
  {
    id: 'n',
    label: 'n',
    title: 'Grades given',
    value: gradesOf,
    filter: 'range',
    sortable: true,
    largestFirst: true,
    numeric: true,
    cell: (row) => gradesOf(row),
  },
  {
    id: 'votes',
    label: 'Grades',
    cell: (row) => <VoteStrip votes={row.votes} dense />,
  },
  {
    id: 'decided',
    label: 'Decided',
    title: 'Decided by',
    value: (row) => row.decidedBy,
    filter: ['verdict', 'ruling'],
    sortable: true,
    cell: (row) => row.decidedBy,
  },
  {
    id: 'entered',
    label: 'Entered',
    title: 'Entered the catalogue, UTC',
    value: (row) => row.enteredAt,
    filter: 'text',
    sortable: true,
    largestFirst: true,
    cell: (row) => (
      <time dateTime={row.enteredAt} title={row.enteredAt} className="figures text-note">
        {row.enteredAt.slice(0, 10)}
      </time>
    ),
  },
  {
    id: 'ra',
    label: 'RA',
    title: 'Right ascension, ICRS',
    value: (row) => row.raDeg ?? undefined,
    sortable: true,
    numeric: true,
    cell: (row) =>
      row.raDeg === null ? none : <CopyText text={formatRightAscension(row.raDeg)} what="right ascension" />,
  },
  {
    id: 'dec',
    label: 'Dec',
    title: 'Declination, ICRS',
    value: (row) => row.decDeg ?? undefined,
    sortable: true,
    numeric: true,
    cell: (row) => (row.decDeg === null ? none : <CopyText text={formatDeclination(row.decDeg)} what="declination" />),
  },
  {
    id: 'radeg',
    label: 'RA, deg',
    title: 'Right ascension, degrees',
    value: (row) => row.raDeg ?? undefined,
    filter: 'range',
    sortable: true,
    numeric: true,
    hidden: true,
    cell: (row) =>
      row.raDeg === null ? (
        none
      ) : (
        <CopyText text={String(row.raDeg)} what="right ascension in degrees">
          {row.raDeg.toFixed(5)}
        </CopyText>
      ),
  },
  {
    id: 'decdeg',
    label: 'Dec, deg',
    title: 'Declination, degrees',
    value: (row) => row.decDeg ?? undefined,
    filter: 'range',
    sortable: true,
    numeric: true,
    hidden: true,
    cell: (row) =>
      row.decDeg === null ? (
        none
      ) : (
        <CopyText text={String(row.decDeg)} what="declination in degrees">
          {row.decDeg.toFixed(5).replace('-', '−')}
        </CopyText>
      ),
  },
  {
    id: 'name',
    label: 'Name',
    title: 'Name in the campaign',
    value: (row) => row.name,
    filter: 'text',
    sortable: true,
    hidden: true,
    cell: (row) => (
      <span className="block max-w-40 truncate" title={row.name}>
        {row.name}
      </span>
    ),
  },
  {
    id: 'cannot',
    label: 'Cannot judge',
    title: 'Who could not judge',
    value: (row) => row.votes.U,
    filter: 'range',
    sortable: true,
    largestFirst: true,
    numeric: true,
    hidden: true,
    cell: (row) => row.votes.U,
  },
  {
    id: 'tags',
    label: 'Tags',
    value: (row) => row.tags,
    filter: 'text',
    hidden: true,
    cell: (row) =>
      row.tags ? (
        <span className="block max-w-56 truncate" title={row.tags}>
          {row.tags}
        </span>
      ) : (
        none
      ),
  },
  redshift('zlens', 'z lens', 'Redshift of the lens', (row) => row.lensRedshift),
  redshift('zsource', 'z source', 'Redshift of the source', (row) => row.sourceRedshift),
]

/** The same where verdicts are by reliability: the lens probability in the place of the spread. */
export const COLUMNS_BY_RELIABILITY: readonly TableColumn<CatalogueRow>[] = CATALOGUE_COLUMNS.map((column) => {
  if (column.id === 'probability') return { ...column, hidden: false }
  return column.id === 'spread' ? { ...column, hidden: true } : column
})

const CLASS_TONE = { A: 'text-letter-a', B: 'text-letter-b', C: 'text-letter-c' } as const

function redshift(
  id: string,
  label: string,
  title: string,
  of: (row: CatalogueRow) => number | null,
): TableColumn<CatalogueRow> {
  return {
    id,
    label,
    title,
    value: (row) => of(row) ?? undefined,
    filter: 'range',
    sortable: true,
    numeric: true,
    hidden: true,
    cell: (row) => figure(of(row), 3),
  }
}
