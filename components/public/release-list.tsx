import { counted, day } from '@/components/campaigns/in-words'
import { releasePath } from '@/lib/work/releases/release-address'

export interface ListedPublicRelease {
  slug: string
  number: number
  kind: 'release' | 'erratum' | 'retraction'
  title: string
  campaign: string
  survey: string
  frozenAt: string
  entries: number
  correctedBy: number[]
  retractedBy: number | null
  standing: boolean
}

/** Public releases, newest first, each with what has become of it. */
export function ReleaseList({ releases, withCampaign }: { releases: ListedPublicRelease[]; withCampaign: boolean }) {
  return (
    <ul className="flex flex-col divide-y divide-line border-y border-line">
      {releases.map((release) => (
        <li key={`${release.slug} ${release.number}`} className="flex flex-col gap-1 py-4">
          <div className="flex flex-wrap items-baseline gap-x-4">
            <a
              href={releasePath(release.slug, release.number)}
              className="text-body font-semibold underline decoration-edge underline-offset-4 hover:decoration-text"
            >
              Release {release.number}: {release.title}
            </a>
            <Fate release={release} />
          </div>
          <p className="text-small text-mute">
            {withCampaign ? `${release.survey}, ${release.campaign}. ` : ''}
            {day(release.frozenAt)}.{' '}
            {release.kind === 'retraction' ? 'A retraction.' : `${counted(release.entries, 'entry', 'entries')}.`}
          </p>
        </li>
      ))}
    </ul>
  )
}

function Fate({ release: { retractedBy, correctedBy, standing, kind } }: { release: ListedPublicRelease }) {
  if (retractedBy !== null) return <span className="text-small text-alarm">withdrawn by release {retractedBy}</span>
  if (correctedBy.length)
    return <span className="text-small text-split">corrected by release {correctedBy.at(-1)}</span>
  if (standing) return <span className="text-small text-lamp">the newest that stands</span>
  return <span className="text-small text-mute">{kind === 'release' ? '' : kind}</span>
}
