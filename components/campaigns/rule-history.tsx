import type { RuleVersion } from '@/lib/work/campaigns/change-settings'
import { moment } from './in-words'

const COLUMNS = [
  { key: 'method', label: 'method' },
  { key: 'gradesWanted', label: 'looks' },
  { key: 'leastGrades', label: 'least' },
  { key: 'confirmMean', label: 'confirm ≥' },
  { key: 'setAsideMean', label: 'set aside ≤' },
  { key: 'splitSpread', label: 'spread >' },
  { key: 'falseConfirmed', label: 'false confirmed' },
  { key: 'missedLens', label: 'missed lenses' },
] as const

type Key = (typeof COLUMNS)[number]['key']

const valueOf = (version: RuleVersion, key: Key): string | number | undefined =>
  (version as Partial<Record<Key, string | number>>)[key]

/** Every version of the rule; what a version changed stands out. Columns of a method that no version has are left out. */
export function RuleHistory({ versions }: { versions: RuleVersion[] }) {
  const columns = COLUMNS.filter(({ key }) => versions.some((version) => valueOf(version, key) !== undefined))
  return (
    <div className="overflow-x-auto" tabIndex={0} role="region" aria-label="History of the rule">
      <table className="w-full text-left text-small">
        <thead>
          <tr className="border-b border-line text-note text-mute">
            <th className="py-2 pr-4 font-normal">version</th>
            {columns.map(({ key, label }) => (
              <th
                key={key}
                className={`whitespace-nowrap py-2 pr-4 font-normal ${key === 'method' ? '' : 'text-right'}`}
              >
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
              {columns.map(({ key }) => (
                <Cell key={key} name={key} version={version} older={versions[index + 1]} />
              ))}
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

function Cell({ name, version, older }: { name: Key; version: RuleVersion; older: RuleVersion | undefined }) {
  const value = valueOf(version, name)
  const changed = value !== undefined && older !== undefined && valueOf(older, name) !== value
  const look = name === 'method' ? '' : 'figures text-right'
  return (
    <td className={`pr-4 ${look} ${changed ? 'font-semibold' : 'text-mute'}`}>
      {value ?? '–'}
      {changed ? <span className="sr-only"> (changed)</span> : null}
    </td>
  )
}
