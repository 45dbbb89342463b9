import type { ReactNode } from 'react'
import type { EntryDetail } from '@/lib/work/releases/read-entry'

export function Fact({ name, children }: { name: string; children: ReactNode }) {
  return (
    <div className="flex flex-col">
      <dt className="text-note text-mute">{name}</dt>
      <dd className="figures text-small [overflow-wrap:anywhere]">{children}</dd>
    </div>
  )
}

/** The Einstein radius as people measured it on the pictures. */
export function Measured({ entry }: { entry: EntryDetail }) {
  const { einsteinRadiusArcsec: radius, einsteinRadiusErrorArcsec: error, nMeasured, scatterArcsec, measuredBy } = entry
  if (radius === null) return <p className="text-small text-mute">Nobody has measured it.</p>
  return (
    <dl className="flex flex-wrap gap-x-8 gap-y-3">
      <Fact name="Einstein radius">
        {radius.toFixed(2)}
        {error === null ? '' : ` ± ${error.toFixed(2)}`} arcsec
      </Fact>
      <Fact name="Measured by">
        {nMeasured === 1 ? '1 person' : `${nMeasured} people`}
        {measuredBy.length ? ` (${measuredBy.join(', ')})` : ''}
      </Fact>
      {scatterArcsec === null ? null : <Fact name="Scatter between them">{scatterArcsec.toFixed(2)} arcsec</Fact>}
    </dl>
  )
}

/** What reference lists call what lies there. */
export function Known({ entry }: { entry: EntryDetail }) {
  if (entry.knownAs.length === 0) {
    return <p className="text-small text-mute">No reference list of this campaign has an object there.</p>
  }
  return (
    <div className="flex flex-col gap-1 text-small">
      <p className="text-note text-mute">Known as</p>
      <ul>
        {entry.knownAs.map(({ list, name, separationArcsec }) => (
          <li key={`${list} ${name}`}>
            <span className="figures">{name}</span>{' '}
            <span className="text-mute">
              in {list}, {separationArcsec.toFixed(1)} arcsec away
            </span>
          </li>
        ))}
      </ul>
    </div>
  )
}
