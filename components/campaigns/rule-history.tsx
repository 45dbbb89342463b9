import type { RuleVersion } from '@/lib/work/campaigns/change-settings'
import { moment } from './in-words'

const COLUMNS = [
  { key: 'gradesWanted', label: 'looks' },
  { key: 'leastGrades', label: 'least' },
] as const

/** What decides, by method. */
const THRESHOLDS = [
  { key: 'confirmMean', label: 'confirm ≥' },
  { key: 'setAsideMean', label: 'set aside ≤' },
  { key: 'splitSpread', label: 'spread >' },
  { key: 'falseConfirmed', label: 'false confirmed' },
  { key: 'missedLens', label: 'missed lenses' },
] as const

type Key = 'method' | (typeof COLUMNS | typeof THRESHOLDS)[number]['key']

const valueOf = (version: RuleVersion | undefined, key: Key): string | number | undefined =>
  (version as Partial<Record<Key, string | number>> | undefined)?.[key]

/** Every version of the rule; what a version changed stands out. */
export function RuleHistory({ versions }: { versions: RuleVersion[] }) {
  return (
    <div className="relative overflow-x-auto" tabIndex={0} role="region" aria-label="History of the rule">
      <table className="w-full text-left text-small">
        <thead>
          <tr className="border-b border-line text-note text-mute">
            <th className="py-2 pr-4 font-normal">version</th>
            <th className="py-2 pr-4 font-normal">method</th>
            {COLUMNS.map(({ key, label }) => (
              <th key={key} className="py-2 pr-4 text-right font-normal">
                {label}
              </th>
            ))}
            <th className="py-2 pr-4 font-normal">decides</th>
            <th className="py-2 font-normal">by</th>
          </tr>
        </thead>
        <tbody>
          {versions.map((version, index) => {
            const older = versions[index + 1]
            return (
              <tr key={version.id} className="h-row border-b border-line">
                <td className="whitespace-nowrap pr-4">
                  <span className="figures">{version.version}</span>
                  {index === 0 ? <span className="text-mute"> in force</span> : null}
                </td>
                <td className="pr-4">
                  <Value name="method" version={version} older={older} />
                </td>
                {COLUMNS.map(({ key }) => (
                  <td key={key} className="pr-4 text-right">
                    <Value name={key} version={version} older={older} />
                  </td>
                ))}
                <td className="pr-4">
                  {THRESHOLDS.filter(({ key }) => valueOf(version, key) !== undefined).map(({ key, label }) => (
                    <span key={key} className="mr-3 inline-block whitespace-nowrap text-mute">
                      {label} <Value name={key} version={version} older={older} />
                    </span>
                  ))}
                </td>
                <td className="text-mute sm:whitespace-nowrap">
                  {version.author}, {moment(version.createdAt)}
                </td>
              </tr>
            )
          })}
        </tbody>
      </table>
    </div>
  )
}

function Value({ name, version, older }: { name: Key; version: RuleVersion; older: RuleVersion | undefined }) {
  const value = valueOf(version, name)
  const changed = older !== undefined && valueOf(older, name) !== value
  return (
    <span className={`${name === 'method' ? '' : 'figures'} ${changed ? 'font-semibold text-text' : 'text-mute'}`}>
      {value}
      {changed ? <span className="sr-only"> (changed)</span> : null}
    </span>
  )
}
