import Link from 'next/link'
import { KeyCap } from '@/components/ui/key-cap'
import { StampFigure } from '@/components/ui/stamp-figure'
import { StatePill } from '@/components/ui/state-pill'
import { VoteStrip } from '@/components/ui/vote-strip'
import { formatDeclination, formatRightAscension } from '@/lib/science/sky/coordinates'
import type { DuplicateMember } from '@/lib/work/matching/duplicates-page'
import { arcsec, KnownLabelMark } from './known-label'

/** One candidate of a group: its stamp, where it is, what people said, and whether it is kept or merged. */
export function MemberCard({
  slug,
  member,
  place,
  isKept,
  isChosen,
  keys,
  onKeep,
  onChoose,
}: {
  slug: string
  member: DuplicateMember
  place: number
  isKept: boolean
  isChosen: boolean
  keys: boolean
  onKeep: () => void
  onChoose: (chosen: boolean) => void
}) {
  const { picture } = member
  return (
    <li
      className={`flex w-60 shrink-0 flex-col gap-2 rounded-tray border p-2 ${isKept ? 'border-lamp' : 'border-line'} ${
        isKept || isChosen ? '' : 'opacity-70'
      }`}
    >
      <div className="night rounded-key bg-tray p-1">
        <StampFigure
          src={picture?.url ?? null}
          alt={`Stamp of ${member.name}`}
          width={picture?.width ?? 1}
          height={picture?.height ?? 1}
          geometry={picture?.geometry ?? null}
        />
      </div>
      <div className="flex flex-wrap items-center justify-between gap-x-2 gap-y-1">
        <Link
          href={`/campaigns/${slug}/candidates/${member.id}`}
          className="figures min-h-6 text-small underline decoration-edge underline-offset-4 hover:decoration-text [overflow-wrap:anywhere]"
        >
          {member.name}
        </Link>
        <StatePill state={member.state} />
      </div>
      {member.known.length > 0 ? (
        <p>
          <KnownLabelMark labels={member.known} />
        </p>
      ) : null}
      <p className="figures text-note text-mute">
        {formatRightAscension(member.raDeg)} {formatDeclination(member.decDeg)}
        <span className="block font-sans">
          {place === 0 ? 'the first of them' : `${arcsec(member.separationArcsec)} from the first`}
        </span>
      </p>
      <VoteStrip votes={member.votes} />
      <div className="mt-auto flex flex-wrap items-center gap-x-4 gap-y-1 text-small">
        <label className="inline-flex min-h-7 items-center gap-2">
          <input type="radio" checked={isKept} onChange={onKeep} name="kept" className="size-4 accent-lamp" />
          keep{' '}
          {keys && place < 9 ? (
            <span aria-hidden="true" className="hidden lg:inline">
              <KeyCap>{String(place + 1)}</KeyCap>
            </span>
          ) : null}
        </label>
        {isKept ? null : (
          <label className="inline-flex min-h-7 items-center gap-2">
            <input
              type="checkbox"
              checked={isChosen}
              onChange={(event) => onChoose(event.target.checked)}
              className="size-4 accent-lamp"
            />
            same object
          </label>
        )}
      </div>
    </li>
  )
}
