import type { KnownLabel } from '@/lib/work/matching/known-labels'

/** `0.21″`, and `12.3″` where hundredths say nothing. */
export const arcsec = (value: number): string => `${value.toFixed(value < 10 ? 2 : 1)}″`

type Told = Pick<KnownLabel, 'name' | 'list' | 'separationArcsec'>

const inFull = ({ name, list, separationArcsec }: Told): string =>
  `${name} of ${list}, ${arcsec(separationArcsec)} away`

/** That reference lists know a candidate: the nearest by name, how many more, and all of them in the title. */
export function KnownLabelMark({ labels }: { labels: readonly Told[] | undefined }) {
  const [nearest, ...more] = labels ?? []
  if (!nearest) return null
  return (
    <span
      title={`Known as ${[nearest, ...more].map(inFull).join('; ')}`}
      className="inline-flex max-w-48 items-center gap-1 truncate rounded-full border border-edge/60 px-2 text-note text-mute"
    >
      <span className="truncate">known: {nearest.name}</span>
      {more.length > 0 ? <span className="figures">+{more.length}</span> : null}
    </span>
  )
}
