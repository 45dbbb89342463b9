import type { ReleaseContents } from '@/lib/work/releases/read-release-page'
import type { ReleaseLinks } from './release-links'

/** What is otherwise than in the release before. */
export function ReleaseChanges({ contents, links }: { contents: ReleaseContents; links: ReleaseLinks }) {
  const { before, changes, hasMoreChanges } = contents
  return (
    <section aria-labelledby="changes" className="flex flex-col gap-3">
      <h2 id="changes" className="text-title font-semibold">
        {before === null ? 'The first release' : `Changes since release ${before}`}
      </h2>
      {before === null ? (
        <p className="text-small text-mute">There is none before it to compare with.</p>
      ) : changes.length === 0 ? (
        <p className="text-small text-mute">Nothing of the catalogue has changed.</p>
      ) : (
        <>
          <div
            className="relative overflow-x-auto"
            role="region"
            aria-label={`Changes since release ${before}, scrolls sideways`}
            tabIndex={0}
          >
            <table className="w-full max-w-4xl border-collapse text-small">
              <caption className="sr-only">Changes since release {before}</caption>
              <thead>
                <tr className="border-b border-line text-left text-note text-mute">
                  {['Candidate', 'What', 'Before', 'Now'].map((name) => (
                    <th key={name} scope="col" className="py-1.5 pr-4 font-semibold">
                      {name}
                    </th>
                  ))}
                </tr>
              </thead>
              <tbody>
                {changes.map(({ name, designation, change, before: from, after }, at) => (
                  <tr key={at} className="border-b border-line align-top">
                    <th scope="row" className="figures py-1.5 pr-4 text-left font-normal whitespace-nowrap">
                      {designation ?? name}
                    </th>
                    <td className="py-1.5 pr-4 whitespace-nowrap">{change}</td>
                    <td className="py-1.5 pr-4 text-mute">{from ?? '–'}</td>
                    <td className="py-1.5">{after ?? '–'}</td>
                  </tr>
                ))}
              </tbody>
            </table>
          </div>
          <p className="text-small">
            {hasMoreChanges ? 'These are the first. ' : ''}
            <a href={links.file('changes.csv')} download className="underline underline-offset-4">
              {hasMoreChanges ? 'All of them as CSV' : 'The same as CSV'}
            </a>
          </p>
        </>
      )}
    </section>
  )
}
