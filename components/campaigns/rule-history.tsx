import type { RuleVersion } from '@/lib/work/campaigns/change-settings'
import { moment } from './in-words'

const COLUMNS = [
  { key: 'gradesWanted', label: 'wanted' },
  { key: 'leastGrades', label: 'least' },
  { key: 'confirmMean', label: 'confirm ≥' },
  { key: 'setAsideMean', label: 'set aside ≤' },
  { key: 'splitSpread', label: 'spread >' },
] as const

/** Every version of the rule; what a version changed stands out. */
export function RuleHistory({ versions }: { versions: RuleVersion[] }) {
  return (
    <div className="overflow-x-auto" tabIndex={0} role="region" aria-label="History of the rule">
      <table className="w-full text-left text-small">
        <thead>
          <tr className="border-b border-line text-note text-mute">
            <th className="py-2 pr-4 font-normal">version</th>
            {COLUMNS.map(({ key, label }) => (
              <th key={key} className="whitespace-nowrap py-2 pr-4 text-right font-normal">
                {label}
              </th>
            ))}
            <th className="py-2 pl-2 font-normal">by</th>
          </tr>
        </thead>
        <tbody>
          {versions.map((version, index) => (
            <tr key={version.id} className="h-row border-b border-line">
              <td className="whitespace-nowrap pr-4">
                <span className="figures">{version.version}</span>
                {index === 0 ? <span className="text-mute"> in force</span> : null}
              </td>
              {COLUMNS.map(({ key }) => {
                const older = versions[index + 1]
                const changed = older !== undefined && older[key] !== version[key]
                return (
                  <td key={key} className={`figures pr-4 text-right ${changed ? 'font-semibold' : 'text-mute'}`}>
                    {version[key]}
                    {changed ? <span className="sr-only"> (changed)</span> : null}
                  </td>
                )
              })}
              <td className="whitespace-nowrap pl-2 text-mute">
                {version.author}, {moment(version.createdAt)}
              </td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  )
}
