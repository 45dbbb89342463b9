import { day } from '@/components/campaigns/in-words'
import { StampOverlay } from '@/components/ui/stamp-overlay'
import { VoteStrip } from '@/components/ui/vote-strip'
import { viewLabel } from '@/lib/science/imaging/recipe'
import { formatDeclination, formatRightAscension } from '@/lib/science/sky/coordinates'
import type { EntryDetail } from '@/lib/work/releases/read-entry'
import type { EntryPage as Entry, ReleaseHead } from '@/lib/work/releases/read-release-page'
import { Fact, Known, Measured } from './entry-facts'
import { PublicFrame } from './public-frame'
import type { ReleaseLinks } from './release-links'
import { ReleaseNotices } from './release-notices'

const CLASS = { A: 'sure lens', B: 'probable lens', C: 'possible lens' }
const link = 'inline-flex min-h-6 items-center underline underline-offset-4'

/** The permanent page of one entry of a release. */
export function EntryPage({
  head,
  page,
  links,
  address,
}: {
  head: ReleaseHead
  page: Entry
  links: ReleaseLinks
  /** Whole, with the site. */
  address: string
}) {
  const { entry, before, after, alsoIn } = page
  return (
    <PublicFrame place={`${head.survey} · ${head.campaign}`} href={links.all}>
      <header className="flex flex-col gap-3">
        <p className="text-small text-mute">
          <a href={links.page()} className="underline underline-offset-4">
            Release {head.number}: {head.title}
          </a>
        </p>
        <h1 className="figures text-display font-semibold [overflow-wrap:anywhere]">{entry.designation}</h1>
        <p className="figures flex flex-wrap gap-x-6 text-small text-mute">
          <span>
            {formatRightAscension(entry.raDeg)} {formatDeclination(entry.decDeg)}
          </span>
          <span>
            {entry.raDeg.toFixed(6)} {entry.decDeg.toFixed(6).replace('-', '−')} deg
          </span>
          <span className="font-sans">ICRS</span>
        </p>
        <ReleaseNotices head={head} links={links} />
      </header>
      <Stamps entry={entry} geometries={page.geometries} links={links} />
      <div className="grid gap-x-12 gap-y-8 lg:grid-cols-2">
        <section aria-labelledby="verdict" className="flex flex-col gap-4">
          <h2 id="verdict" className="text-title font-semibold">
            {entry.class ? `Class ${entry.class}, ${CLASS[entry.class]}` : 'Confirmed, without class'}
          </h2>
          <p className="max-w-prose">
            {entry.decidedBy === 'ruling' ? 'Ruled by a lead: ' : ''}
            {entry.reason}
          </p>
          <VoteStrip votes={entry.votes} />
          <dl className="flex flex-wrap gap-x-8 gap-y-3">
            {entry.mean === null ? null : (
              <Fact name="Mean of grade points">
                {entry.mean.toFixed(2)}
                {entry.spread === null ? '' : `, spread ${entry.spread.toFixed(2)}`}
              </Fact>
            )}
            {entry.probability === null ? null : <Fact name="Lens probability">{entry.probability.toFixed(4)}</Fact>}
            {entry.tags ? <Fact name="Seen by graders">{entry.tags}</Fact> : null}
          </dl>
          <p className="border-l-4 border-lamp pl-4 text-small">{head.cautions[0]}</p>
          {entry.remarks.length ? (
            <ul aria-label="Remarks of graders" className="flex flex-col gap-2 text-small">
              {entry.remarks.map(({ by, remark }, at) => (
                <li key={at} className="whitespace-pre-line">
                  <span className="figures text-mute">{by}</span> {remark}
                </li>
              ))}
            </ul>
          ) : null}
        </section>
        <section aria-labelledby="object" className="flex flex-col gap-4">
          <h2 id="object" className="text-title font-semibold">
            The object
          </h2>
          <Measured entry={entry} />
          <Known entry={entry} />
          <dl className="flex flex-wrap gap-x-8 gap-y-3">
            <Fact name="Name in its campaign">{entry.name}</Fact>
            {entry.lensRedshift === null ? null : <Fact name="Redshift of the lens">{entry.lensRedshift}</Fact>}
            {entry.sourceRedshift === null ? null : <Fact name="Redshift of the source">{entry.sourceRedshift}</Fact>}
            {entry.enteredAt ? <Fact name="In the catalogue since">{day(entry.enteredAt)}</Fact> : null}
          </dl>
        </section>
      </div>
      <section aria-labelledby="address" className="flex flex-col gap-2 text-small">
        <h2 id="address" className="text-title font-semibold">
          This address stays
        </h2>
        <p className="figures break-all">{address}</p>
        <p className="text-mute">Cite the release: {head.howToCite}</p>
        <p className="flex flex-wrap gap-x-5">
          <a href={links.entryJson(entry.key)} type="application/json" className={link}>
            This entry as JSON
          </a>
          {alsoIn.map(({ number, key, withdrawn }) => (
            <a key={number} href={links.otherEntry(number, key)} className={link}>
              In release {number}
              {withdrawn ? ' (withdrawn)' : ''}
            </a>
          ))}
        </p>
      </section>
      <nav
        aria-label="Entries beside"
        className="flex flex-wrap justify-between gap-4 border-t border-line pt-4 text-small"
      >
        {before ? (
          <a href={links.entry(before.key)} rel="prev" className={`figures ${link}`}>
            ← {before.designation}
          </a>
        ) : (
          <span />
        )}
        {after ? (
          <a href={links.entry(after.key)} rel="next" className={`figures ${link}`}>
            {after.designation} →
          </a>
        ) : null}
      </nav>
    </PublicFrame>
  )
}

/** All views on the black tray, captions in the tray and not on the pictures; the first is the large one. */
function Stamps({
  entry,
  geometries,
  links,
}: {
  entry: EntryDetail
  geometries: Entry['geometries']
  links: ReleaseLinks
}) {
  const { stamps, thumbnail, designation, key } = entry
  if (stamps.length === 0) return <p className="text-small text-mute">This release has no pictures of it.</p>
  const first = stamps.find(({ sha256 }) => sha256 === thumbnail) ?? stamps[0]
  const views = [first, ...stamps.filter((stamp) => stamp !== first)]
  return (
    <ul
      aria-label="Views"
      className="night grid grid-cols-2 gap-2 rounded-tray bg-tray p-2 sm:grid-cols-4 lg:grid-cols-6"
    >
      {views.map(({ view, sha256 }, at) => (
        <li key={view} className={at === 0 ? 'col-span-2 row-span-2' : ''}>
          <figure className="m-0">
            <span className="relative block">
              <img
                src={links.stamp(key, sha256)}
                alt={`${designation}, ${viewLabel(view)}`}
                width={at === 0 ? 480 : 240}
                height={at === 0 ? 480 : 240}
                fetchPriority={at === 0 ? 'high' : 'auto'}
                decoding="async"
                className="pixelated aspect-square h-auto w-full bg-black object-contain"
              />
              {geometries[view] ? <StampOverlay {...geometries[view]} /> : null}
            </span>
            <figcaption className="pt-1 text-note text-tray-text">
              {viewLabel(view)}
              {geometries[view] ? <span className="figures">{fieldInWords(geometries[view])}</span> : null}
            </figcaption>
          </figure>
        </li>
      ))}
    </ul>
  )
}

/** Its longer side on the sky. */
function fieldInWords({ width, height, geometry }: Entry['geometries'][string]): string {
  const { pixelScaleArcsec: scale } = geometry
  return scale === null ? '' : `, ${(Math.max(width, height) * scale).toFixed(1)}″ across`
}
