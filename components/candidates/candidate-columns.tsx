import Link from 'next/link'
import { CopyButton, CopyText } from '@/components/table/copy-text'
import { StampThumbnail } from '@/components/table/stamp-thumbnail'
import type { TableColumn } from '@/components/table/table-column'
import type { TableSort } from '@/components/table/table-state'
import { StatePill } from '@/components/ui/state-pill'
import { VoteStrip } from '@/components/ui/vote-strip'
import { probabilityBeside } from '@/lib/science/agreement/weight-words'
import { formatDeclination, formatRightAscension } from '@/lib/science/sky/coordinates'
import type { CandidateTableRow } from '@/lib/work/catalogue/candidate-table'

export interface CandidateRow extends CandidateTableRow {
  href: string
}

export type ColumnsFor = 'lead' | 'grader' | 'viewer'

/** By name: the order of arrival is that in which uploads happened to end. */
export const CANDIDATE_SORT: TableSort = { id: 'name', descending: false }

/** A state filter's word for what a grader may not see yet. */
export const UNGRADED = 'not graded by me'

/** A state filter's word for what the first pass has not sent on to the bench. */
export const NOT_SENT_ON = 'not sent on'

const none = <span className="text-mute">–</span>
const figure = (value: number | null | undefined, decimals: number) =>
  value === null || value === undefined ? none : value.toFixed(decimals)

const NAME: TableColumn<CandidateRow> = {
  id: 'name',
  label: 'Candidate',
  filter: 'text',
  sortable: true,
  pinned: true,
  cell: (row) => (
    <span className="flex items-center gap-1.5">
      <StampThumbnail src={row.thumbnail} name={row.name} />
      <Link
        href={row.href}
        prefetch={false}
        title={row.name}
        className="figures max-w-56 truncate text-note text-text underline decoration-line underline-offset-4 hover:decoration-text"
      >
        {row.name}
      </Link>
      {row.calibration ? (
        <span className="rounded-full border border-edge/60 px-2 text-note text-mute">calibration</span>
      ) : null}
    </span>
  ),
}

const STATE = (choices: readonly string[]): TableColumn<CandidateRow> => ({
  id: 'state',
  label: 'State',
  filter: choices,
  filterSpills: true,
  sortable: true,
  cell: (row) =>
    row.state ? <StatePill state={row.state} /> : <span className="text-note text-mute">after your grade</span>,
})

const JUDGED: readonly TableColumn<CandidateRow>[] = [
  { id: 'votes', label: 'Grades', cell: (row) => (row.votes ? <VoteStrip votes={row.votes} dense /> : none) },
  {
    id: 'mean',
    label: 'Mean',
    title: 'Mean grade of the verdict, points',
    sortable: true,
    largestFirst: true,
    numeric: true,
    cell: (row) => figure(row.verdict?.mean, 2),
  },
  {
    id: 'spread',
    label: 'Spread',
    title: 'Spread of the verdict, points',
    sortable: true,
    largestFirst: true,
    numeric: true,
    cell: (row) => figure(row.verdict?.spread, 2),
  },
]

const PROBABILITY: TableColumn<CandidateRow> = {
  id: 'probability',
  label: 'Lens p',
  title: 'Lens probability of the verdict',
  sortable: true,
  largestFirst: true,
  numeric: true,
  hidden: true,
  cell: (row) => (row.verdict?.probability == null ? none : probabilityBeside(row.verdict.probability)),
}

const SCORE: TableColumn<CandidateRow> = {
  id: 'score',
  label: 'Score',
  title: 'Score of the machine search',
  sortable: true,
  largestFirst: true,
  numeric: true,
  cell: (row) => figure(row.score, 3),
}

const POSITION: readonly TableColumn<CandidateRow>[] = [
  {
    id: 'ra',
    label: 'RA',
    title: 'Right ascension, ICRS',
    sortable: true,
    numeric: true,
    cell: (row) =>
      row.raDeg === null ? none : <CopyText text={formatRightAscension(row.raDeg)} what="right ascension" />,
  },
  {
    id: 'dec',
    label: 'Dec',
    title: 'Declination, ICRS',
    sortable: true,
    numeric: true,
    cell: (row) => (row.decDeg === null ? none : <CopyText text={formatDeclination(row.decDeg)} what="declination" />),
  },
  {
    id: 'radeg',
    label: 'RA, deg',
    title: 'Right ascension, degrees',
    numeric: true,
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
    numeric: true,
    cell: (row) =>
      row.decDeg === null ? (
        none
      ) : (
        <CopyText text={String(row.decDeg)} what="declination in degrees">
          {row.decDeg.toFixed(5).replace('-', '−')}
        </CopyText>
      ),
  },
]

const DESIGNATION: TableColumn<CandidateRow> = {
  id: 'designation',
  label: 'Designation',
  hidden: true,
  cell: (row) =>
    row.designation ? (
      <span className="figures flex items-center gap-1 text-note">
        {row.designation} <CopyButton text={row.designation} what="designation" />
      </span>
    ) : (
      none
    ),
}

const STATES = ['open', 'split', 'confirmed', 'set aside'] as const

/** For each role a list of its own, made once: the score and what is calibration are for leads. */
export const CANDIDATE_COLUMNS: Record<ColumnsFor, readonly TableColumn<CandidateRow>[]> = {
  lead: [NAME, STATE([...STATES, NOT_SENT_ON]), ...JUDGED, PROBABILITY, SCORE, ...POSITION, DESIGNATION],
  grader: [NAME, STATE([UNGRADED, ...STATES]), ...JUDGED, PROBABILITY, ...POSITION, DESIGNATION],
  viewer: [NAME, STATE(STATES), ...JUDGED, PROBABILITY, ...POSITION, DESIGNATION],
}

/** The same where the rule goes by reliability: the lens probability in the place of the spread. */
const told = (columns: readonly TableColumn<CandidateRow>[]) =>
  columns.map((column) => {
    if (column.id === 'probability') return { ...column, hidden: false }
    return column.id === 'spread' ? { ...column, hidden: true } : column
  })
export const COLUMNS_BY_RELIABILITY: typeof CANDIDATE_COLUMNS = {
  lead: told(CANDIDATE_COLUMNS.lead),
  grader: told(CANDIDATE_COLUMNS.grader),
  viewer: told(CANDIDATE_COLUMNS.viewer),
}
