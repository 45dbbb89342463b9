import Link from 'next/link'
import { counted } from '@/components/campaigns/in-words'
import { Notice } from '@/components/ui/notice'
import type { ReleasePreview } from '@/lib/work/releases/preview-release'

/** What a release that is published now would hold, and what keeps it from being published. */
export function ReleasePreviewTray({ home, preview }: { home: string; preview: ReleasePreview }) {
  const { confirmed, setAside, split, open, unjudged, unplaced, before, gradesSinceRun, stamps } = preview
  return (
    <section aria-label="What would be in it" className="flex flex-col gap-4">
      <dl className="grid grid-cols-2 gap-px overflow-hidden rounded-tray border border-line bg-line sm:grid-cols-4">
        <Figure name={confirmed === 1 ? 'entry' : 'entries'} value={confirmed} strong />
        <Figure name="set aside" value={setAside} />
        <Figure name="split" value={split} />
        <Figure name="open, with grades" value={open} />
      </dl>
      {unjudged > 0 ? (
        <p className="text-small text-mute">
          {counted(unjudged, 'candidate')} more without a grade or a ruling {unjudged === 1 ? 'is' : 'are'} in no file.
        </p>
      ) : null}
      <p className="text-small text-mute">
        {before === null
          ? 'It is the first, so there is nothing to compare it with.'
          : `Against release ${before}: ${preview.enteredCount} more, ${preview.leftCount} no longer in it.`}
        {gradesSinceRun > 0
          ? ` ${counted(gradesSinceRun, 'grade')} came since the newest consensus: it is run first, and the numbers may move.`
          : ''}
      </p>
      {before !== null && preview.enteredCount + preview.leftCount > 0 ? (
        <div className="grid gap-4 text-small md:grid-cols-2">
          <Names title="New in it" names={preview.entered} count={preview.enteredCount} />
          <Names title="No longer in it" names={preview.left} count={preview.leftCount} />
        </div>
      ) : null}
      {unplaced.length > 0 ? (
        <Notice tone="alarm">
          {unplaced.slice(0, 5).join(', ')}
          {unplaced.length > 5 ? ` and ${unplaced.length - 5} more` : ''} {unplaced.length === 1 ? 'is' : 'are'}{' '}
          confirmed without a position, so there is no designation and nothing can be published. Deliver a manifest with
          positions on the{' '}
          <Link href={`${home}/intake`} className="underline underline-offset-4">
            intake page
          </Link>
          , or set aside what has none.
        </Notice>
      ) : null}
      {stamps > 0 ? (
        <Notice>
          The {counted(stamps, 'calibration stamp')} of this campaign {stamps === 1 ? 'is' : 'are'} in no file. Whoever
          has graded some and reads the files can tell them by that: paint new ones before people grade on.
        </Notice>
      ) : null}
      {open + split > 0 ? (
        <p className="text-note text-mute">
          Candidates that are open or split are in the files with their grades so far. Once the release is public,
          graders can read them there before they have graded.
        </p>
      ) : null}
    </section>
  )
}

function Figure({ name, value, strong = false }: { name: string; value: number; strong?: boolean }) {
  return (
    <div className="flex flex-col-reverse bg-page px-4 py-3">
      <dt className="text-note text-mute">{name}</dt>
      <dd className={`figures text-title ${strong ? 'font-semibold' : ''}`}>{value.toLocaleString('en')}</dd>
    </div>
  )
}

function Names({ title, names, count }: { title: string; names: string[]; count: number }) {
  if (count === 0) return null
  return (
    <div>
      <h3 className="font-semibold">{title}</h3>
      <ul className="figures mt-1 text-note text-mute">
        {names.map((name) => (
          <li key={name}>{name}</li>
        ))}
        {count > names.length ? <li>and {count - names.length} more</li> : null}
      </ul>
    </div>
  )
}
