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
import { StatePill } from '@/components/ui/state-pill'
import { VoteStrip } from '@/components/ui/vote-strip'
import { probabilityBeside } from '@/lib/science/agreement/weight-words'
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
      <KnownLabelMark labels={row.known} />
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
  sortable: true,
  cell: (row) =>
    row.state ? <StatePill state={row.state} /> : <span className="text-note text-mute">after your grade</span>,
})

const JUDGED: readonly TableColumn<CandidateRow>[] = [
  {
    id: 'votes',
    label: 'Grades',
    title: 'Grades given',
    filter: 'range',
    sortable: true,
    largestFirst: true,
    cell: (row) => (row.votes ? <VoteStrip votes={row.votes} dense /> : none),
  },
  {
    id: 'mean',
    label: 'Mean',
    title: 'Mean grade of the verdict, points',
    filterTitle: 'Mean, points',
    filter: 'range',
    sortable: true,
    largestFirst: true,
    numeric: true,
    cell: (row) => figure(row.verdict?.mean, 2),
  },
  {
    id: 'spread',
    label: 'Spread',
    title: 'Spread of the verdict, points',
    filterTitle: 'Spread, points',
    filter: 'range',
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
  filterTitle: 'Lens probability',
  filter: 'range',
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
  filterTitle: 'Machine score',
  filter: 'range',
  sortable: true,
  largestFirst: true,
  numeric: true,
  cell: (row) => figure(row.score, 3),
}

const DESIGNATION: TableColumn<CandidateRow> = {
  id: 'designation',
  label: 'Designation',
  filter: 'text',
  sortable: true,
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

const CALIBRATION: TableColumn<CandidateRow> = {
  id: 'calibration',
  label: 'Calibration',
  filter: ['candidate', 'calibration'],
  filterTitle: 'Candidates or calibration',
  filterOnly: true,
  cell: () => null,
}

const STATES = ['open', 'split', 'confirmed', 'set aside'] as const
const POSITION = POSITION_COLUMNS as readonly TableColumn<CandidateRow>[]
const MADE_OF: readonly TableColumn<CandidateRow>[] = [
  DESIGNATION,
  ...WORD_COLUMNS,
  ...FINDING_COLUMNS,
  decidedColumn({ hidden: true }),
  enteredColumn({ hidden: true }),
]

/**
 * For each role a list of its own, made once: the score and what is calibration are for leads. Graders find redshifts in the catalogue:
 * in this list what has none would stand out, and calibration stamps have none.
 */
export const CANDIDATE_COLUMNS: Record<ColumnsFor, readonly TableColumn<CandidateRow>[]> = {
  lead: [
    NAME,
    STATE([...STATES, NOT_SENT_ON]),
    ...JUDGED,
    PROBABILITY,
    SCORE,
    ...POSITION,
    ...MADE_OF,
    ...REDSHIFT_COLUMNS,
    CALIBRATION,
  ],
  grader: [NAME, STATE([UNGRADED, ...STATES]), ...JUDGED, PROBABILITY, ...POSITION, ...MADE_OF],
  viewer: [NAME, STATE(STATES), ...JUDGED, PROBABILITY, ...POSITION, ...MADE_OF, ...REDSHIFT_COLUMNS],
}

/** The same where the rule goes by reliability. */
export const COLUMNS_BY_RELIABILITY: typeof CANDIDATE_COLUMNS = {
  lead: toldByProbability(CANDIDATE_COLUMNS.lead),
  grader: toldByProbability(CANDIDATE_COLUMNS.grader),
  viewer: toldByProbability(CANDIDATE_COLUMNS.viewer),
}
