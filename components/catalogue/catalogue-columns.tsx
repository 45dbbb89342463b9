import Link from 'next/link'
import { CopyButton } from '@/components/table/copy-text'
import {
  decidedColumn,
  enteredColumn,
  figure,
  FINDING_COLUMNS,
  none,
  POSITION_COLUMNS,
  REDSHIFT_COLUMNS,
  toldByProbability,
  WORD_COLUMNS,
} from '@/components/table/shared-columns'
import { KnownLabelMark } from '@/components/matching/known-label'
import { StampThumbnail } from '@/components/table/stamp-thumbnail'
import type { TableColumn } from '@/components/table/table-column'
import type { TableSort } from '@/components/table/table-state'
import { VoteStrip } from '@/components/ui/vote-strip'
import { probabilityBeside } from '@/lib/science/agreement/weight-words'
import type { CatalogueTableRow } from '@/lib/work/catalogue/catalogue-table'

export interface CatalogueRow extends CatalogueTableRow {
  /** The page of the candidate with its evidence. */
  href: string
}

/** The surest first. */
export const CATALOGUE_SORT: TableSort = { id: 'mean', descending: true }

const gradesOf = ({ votes }: CatalogueRow) => votes.A + votes.B + votes.C + votes.N
export const CATALOGUE_COLUMNS: readonly TableColumn<CatalogueRow>[] = [
  {
    id: 'designation',
    label: 'Designation',
    title: 'Designation and name',
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
        <KnownLabelMark labels={row.known} />
      </span>
    ),
  },
  {
    id: 'class',
    label: 'Class',
    title: 'Grade class',
    filter: ['A', 'B', 'C'],
    sortable: true,
    cell: (row) => (row.gradeClass ? <b className={CLASS_TONE[row.gradeClass]}>{row.gradeClass}</b> : none),
  },
  {
    id: 'mean',
    label: 'Mean',
    title: 'Mean grade, points',
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
  decidedColumn({}),
  enteredColumn({}),
  ...(POSITION_COLUMNS as readonly TableColumn<CatalogueRow>[]),
  {
    id: 'name',
    label: 'Name',
    title: 'Name in the campaign',
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
    filter: 'range',
    sortable: true,
    largestFirst: true,
    numeric: true,
    hidden: true,
    cell: (row) => row.votes.U,
  },
  ...WORD_COLUMNS,
  ...FINDING_COLUMNS,
  ...REDSHIFT_COLUMNS,
]

/** The same where verdicts are by reliability. */
export const COLUMNS_BY_RELIABILITY = toldByProbability(CATALOGUE_COLUMNS)

const CLASS_TONE = { A: 'text-letter-a', B: 'text-letter-b', C: 'text-letter-c' } as const
