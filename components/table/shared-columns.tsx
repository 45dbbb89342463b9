import { formatDeclination, formatRightAscension } from '@/lib/science/sky/coordinates'
import type { KnownAs, MeasuredRadius } from '@/lib/work/catalogue/beside-rows'
import { CopyText } from './copy-text'
import type { TableColumn } from './table-column'

/** What candidates and entries have alike. */
export interface PlacedRow {
  raDeg: number | null
  decDeg: number | null
}

export interface DescribedRow extends PlacedRow {
  lensRedshift: number | null
  sourceRedshift: number | null
  tags: string
  remarks: string
  known: KnownAs[]
  einstein: MeasuredRadius | null
}

export const none = <span className="text-mute">–</span>
export const figure = (value: number | null | undefined, decimals: number) =>
  value === null || value === undefined ? none : value.toFixed(decimals)

export const positionOf = ({ raDeg, decDeg }: PlacedRow) =>
  raDeg === null || decDeg === null ? null : { raDeg, decDeg }

/** Sexagesimal, and in degrees beside it for who asks. */
export const POSITION_COLUMNS: readonly TableColumn<PlacedRow>[] = [
  {
    id: 'ra',
    label: 'RA',
    title: 'Right ascension, ICRS',
    filter: 'ra',
    filterTitle: 'RA from..to',
    sortable: true,
    numeric: true,
    cell: ({ raDeg }) =>
      raDeg === null ? none : <CopyText text={formatRightAscension(raDeg)} what="right ascension" />,
  },
  {
    id: 'dec',
    label: 'Dec',
    title: 'Declination, ICRS',
    filter: 'dec',
    filterTitle: 'Dec from..to',
    sortable: true,
    numeric: true,
    cell: ({ decDeg }) => (decDeg === null ? none : <CopyText text={formatDeclination(decDeg)} what="declination" />),
  },
  {
    id: 'radeg',
    label: 'RA, deg',
    title: 'Right ascension, degrees',
    sortable: true,
    numeric: true,
    hidden: true,
    cell: ({ raDeg }) =>
      raDeg === null ? (
        none
      ) : (
        <CopyText text={String(raDeg)} what="right ascension in degrees">
          {raDeg.toFixed(5)}
        </CopyText>
      ),
  },
  {
    id: 'decdeg',
    label: 'Dec, deg',
    title: 'Declination, degrees',
    sortable: true,
    numeric: true,
    hidden: true,
    cell: ({ decDeg }) =>
      decDeg === null ? (
        none
      ) : (
        <CopyText text={String(decDeg)} what="declination in degrees">
          {decDeg.toFixed(5).replace('-', '−')}
        </CopyText>
      ),
  },
]

export const REDSHIFT_COLUMNS: readonly TableColumn<DescribedRow>[] = [
  redshift('zlens', 'z lens', 'Redshift of the lens', (row) => row.lensRedshift),
  redshift('zsource', 'z source', 'Redshift of the source', (row) => row.sourceRedshift),
]

function redshift(
  id: string,
  label: string,
  title: string,
  of: (row: DescribedRow) => number | null,
): TableColumn<DescribedRow> {
  return {
    id,
    label,
    title,
    filter: 'range',
    sortable: true,
    numeric: true,
    hidden: true,
    cell: (row) => figure(of(row), 3),
  }
}

const long = (text: string, width: string) =>
  text ? (
    <span className={`block truncate ${width}`} title={text}>
      {text}
    </span>
  ) : (
    none
  )

/** What people saw and wrote. */
export const WORD_COLUMNS: readonly TableColumn<DescribedRow>[] = [
  { id: 'tags', label: 'Tags', filter: 'text', hidden: true, cell: (row) => long(row.tags, 'max-w-56') },
  {
    id: 'remark',
    label: 'Remarks',
    title: 'Remarks of graders',
    filterTitle: 'Remarks',
    filter: 'text',
    hidden: true,
    cell: (row) => long(row.remarks, 'max-w-80'),
  },
]

/** What is known of the place from elsewhere, and measured on the picture. */
export const FINDING_COLUMNS: readonly TableColumn<DescribedRow>[] = [
  {
    id: 'known',
    label: 'Known as',
    title: 'Known as, by reference lists',
    filter: ['known', 'new'],
    filterTitle: 'Known or new',
    hidden: true,
    cell: ({ known }) =>
      known.length > 0 ? (
        <span className="block max-w-64 truncate" title={known.map(inWords).join('; ')}>
          {known.map(({ name }) => name).join(', ')}
        </span>
      ) : (
        none
      ),
  },
  {
    id: 'einstein',
    label: 'θE, arcsec',
    title: 'Einstein radius measured, arcsec',
    filterTitle: 'Einstein radius, arcsec',
    filter: 'range',
    sortable: true,
    largestFirst: true,
    numeric: true,
    hidden: true,
    cell: ({ einstein }) =>
      einstein === null ? (
        none
      ) : (
        <span title={`${einstein.count} ${einstein.count === 1 ? 'person' : 'people'}`}>
          {einstein.radiusArcsec.toFixed(2)}
          {einstein.errorArcsec === null ? '' : ` ± ${einstein.errorArcsec.toFixed(2)}`}
        </span>
      ),
  },
]

const inWords = ({ name, list, separationArcsec }: KnownAs) =>
  `${name}, ${list}, ${separationArcsec.toFixed(2)} arcsec away`

export const enteredColumn = (of: { hidden?: boolean }): TableColumn<{ enteredAt: string | null }> => ({
  id: 'entered',
  label: 'Entered',
  title: 'Entered the catalogue, UTC',
  filterTitle: 'Entered, UTC',
  filter: 'date',
  sortable: true,
  largestFirst: true,
  cell: ({ enteredAt }) =>
    enteredAt === null ? (
      none
    ) : (
      <time dateTime={enteredAt} title={enteredAt} className="figures text-note">
        {enteredAt.slice(0, 10)}
      </time>
    ),
  ...of,
})

export const decidedColumn = (of: { hidden?: boolean }): TableColumn<{ decidedBy: 'verdict' | 'ruling' | null }> => ({
  id: 'decided',
  label: 'Decided',
  title: 'Decided by',
  filter: ['verdict', 'ruling'],
  sortable: true,
  cell: ({ decidedBy }) => decidedBy ?? none,
  ...of,
})

/** The lens probability in the place of the spread, where verdicts are by reliability. */
export function toldByProbability<Row>(columns: readonly TableColumn<Row>[]): readonly TableColumn<Row>[] {
  return columns.map((column) => {
    if (column.id === 'probability') return { ...column, hidden: false }
    return column.id === 'spread' ? { ...column, hidden: true } : column
  })
}
