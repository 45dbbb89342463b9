import { SkyMap, skyInWords, type SkyMarks } from '@/components/sky/sky-map'
import type { ReleaseSky } from '@/lib/work/releases/release-sky'
import type { ReleaseLinks } from './release-links'

const CLASS_WORDS = { A: 'A sure', B: 'B probable', C: 'C possible' }
const CLASSES = ['A', 'B', 'C'] as const
const CELLS_LISTED = 30

/** The map of a release with what it says in words, and where it shows densities their numbers. */
export function SkySection({ sky, links }: { sky: ReleaseSky; links: ReleaseLinks }) {
  if (sky.entries === 0) return null
  const marks: SkyMarks =
    sky.kind === 'points'
      ? {
          ...sky,
          points: sky.points.map(({ key, designation, ...place }) => {
            return { ...place, key, label: designation, href: links.entry(key) }
          }),
        }
      : sky
  const most = sky.kind === 'cells' ? Math.max(...sky.cells.map(({ count }) => count)) : 0
  const perDeg2 = (count: number) =>
    sky.kind === 'cells' ? Number((count / sky.cellAreaDeg2).toPrecision(3)).toLocaleString('en') : ''
  return (
    <figure aria-label="Sky map" className="m-0 flex w-full max-w-[31rem] flex-col gap-2">
      <SkyMap id="sky" title="Where the entries lie on the sky" marks={marks} />
      <figcaption className="flex flex-col gap-1 text-note text-mute">
        {sky.kind === 'points' ? (
          <span className="flex flex-wrap items-center gap-x-4">
            {CLASSES.filter((one) => sky.points.some((point) => point.class === one)).map((one) => (
              <span key={one} className="flex items-center gap-1.5">
                <svg width="10" height="10" aria-hidden="true">
                  <circle cx="5" cy="5" r="4" fill={`var(--grade-${one.toLowerCase()})`} stroke="var(--text)" />
                </svg>
                {CLASS_WORDS[one]}
              </span>
            ))}
            <span>Equal-area map; each dot leads to its entry.</span>
          </span>
        ) : (
          <span>
            Equal-area map, {sky.entries.toLocaleString('en')} entries: up to {perDeg2(most)} a square degree where it
            is brightest.
          </span>
        )}
        {sky.kind === 'cells' ? (
          <details>
            <summary className="inline-flex min-h-6 items-center">The densest cells as a table</summary>
            <table className="figures mt-1 w-full border-collapse text-right">
              <caption className="sr-only">{skyInWords(marks)}</caption>
              <thead>
                <tr className="border-b border-line font-sans">
                  {['RA, deg', 'Dec, deg', 'Entries', 'per deg²'].map((name) => (
                    <th key={name} scope="col" className="py-1 pl-3 font-semibold">
                      {name}
                    </th>
                  ))}
                </tr>
              </thead>
              <tbody>
                {sky.cells
                  .toSorted((a, b) => b.count - a.count)
                  .slice(0, CELLS_LISTED)
                  .map((cell) => (
                    <tr key={`${cell.westRaDeg} ${cell.southDecDeg}`}>
                      <td className="pl-3">{((cell.westRaDeg + cell.eastRaDeg) / 2).toFixed(2)}</td>
                      <td className="pl-3">
                        {((cell.southDecDeg + cell.northDecDeg) / 2).toFixed(2).replace('-', '−')}
                      </td>
                      <td className="pl-3">{cell.count.toLocaleString('en')}</td>
                      <td className="pl-3">{perDeg2(cell.count)}</td>
                    </tr>
                  ))}
              </tbody>
            </table>
          </details>
        ) : null}
      </figcaption>
    </figure>
  )
}
