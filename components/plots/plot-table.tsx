import type { PlotTable } from './plot-file'

/** The numbers of a plot for those who would rather read them. */
export function PlotTableView({ caption, table }: { caption: string; table: PlotTable }) {
  const show = (value: string | number | null) => {
    if (value === null) return '–'
    if (typeof value === 'string') return value
    if (Number.isInteger(value)) return value.toLocaleString('en').replace('-', '−')
    return value.toFixed(table.digits ?? 2).replace('-', '−')
  }
  return (
    <div
      role="region"
      aria-label={`${caption}, as a table`}
      tabIndex={0}
      className="max-h-112 overflow-auto rounded-tray border border-line"
    >
      <table className="w-full border-collapse text-small">
        <caption className="sr-only">{caption}</caption>
        <thead className="sticky top-0 bg-raise">
          <tr>
            {table.columns.map(({ name, numeric }) => (
              <th
                key={name}
                scope="col"
                className={`border-b border-line px-3 py-1.5 align-bottom font-semibold ${numeric ? 'text-right' : 'text-left'}`}
              >
                {name}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {table.rows.map((row, index) => (
            <tr key={index} className="border-b border-line last:border-b-0">
              {row.map((cell, column) => (
                <td
                  key={column}
                  className={`px-3 py-1 ${table.columns[column].numeric ? 'figures whitespace-nowrap text-right' : ''}`}
                >
                  {show(cell)}
                </td>
              ))}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  )
}
