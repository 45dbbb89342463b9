import { formatDeclination, formatRightAscension } from '@/lib/science/sky/coordinates'
import type { ListLook } from '@/lib/work/matching/read-list'

const HEAD = 'border-b border-edge/60 px-2.5 py-1.5 text-left text-note font-normal text-mute'
const CELL = 'figures border-b border-line px-2.5 py-1.5 text-note whitespace-nowrap'

/** The first rows, and behind them those that something is wrong with: what the file says, and what is read of it. */
export function LookTable({ look }: { look: ListLook }) {
  const { rows, format, mapping } = look
  const has = (of: (row: ListLook['rows'][number]) => boolean) => rows.some(of)
  const place = format === 'csv' ? 'Line' : 'Row'
  return (
    <div
      className="relative overflow-x-auto"
      tabIndex={0}
      role="region"
      aria-label="The first rows, and those at fault, as they are read"
    >
      <table className="w-full border-collapse">
        <thead>
          <tr>
            {[place, 'Name', 'In the file', 'RA, ICRS', 'Dec, ICRS', 'RA, Dec, degrees'].map((head) => (
              <th key={head} scope="col" className={HEAD}>
                {head}
              </th>
            ))}
            {mapping.redshift ? (
              <th scope="col" className={HEAD}>
                z
              </th>
            ) : null}
            {has(({ more }) => Object.keys(more).length > 0) ? (
              <th scope="col" className={HEAD}>
                Further
              </th>
            ) : null}
          </tr>
        </thead>
        <tbody>
          {rows.map((row) => (
            <tr key={row.row}>
              <td className={`${CELL} text-mute`}>{row.row}</td>
              <td className={CELL}>{row.name}</td>
              <td className={`${CELL} text-mute`}>
                {row.raText || '–'}, {row.decText || '–'}
              </td>
              {row.raDeg === null || row.decDeg === null ? (
                <td colSpan={3} className={`${CELL} font-sans text-alarm`}>
                  no position
                </td>
              ) : (
                <>
                  <td className={CELL}>{formatRightAscension(row.raDeg)}</td>
                  <td className={CELL}>{formatDeclination(row.decDeg)}</td>
                  <td className={CELL}>
                    {row.raDeg.toFixed(5)}, {row.decDeg.toFixed(5).replace('-', '−')}
                  </td>
                </>
              )}
              {mapping.redshift ? <td className={CELL}>{row.redshift ?? '–'}</td> : null}
              {has(({ more }) => Object.keys(more).length > 0) ? (
                <td className={`${CELL} max-w-72 truncate font-sans text-mute`}>
                  {Object.entries(row.more)
                    .map(([column, value]) => `${column} ${value}`)
                    .join(', ')}
                </td>
              ) : null}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  )
}
