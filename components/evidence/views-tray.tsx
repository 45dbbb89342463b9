import type { CSSProperties } from 'react'
import { StampFigure } from '@/components/ui/stamp-figure'
import type { CandidatePictures } from '@/lib/work/stamps/candidate-pictures'

/**
 * All views of a candidate on the black tray: one large, every one as a slide at its side (below it on a phone). Black in
 * both themes, because a coloured surround changes what people see.
 */
export function ViewsTray({
  name,
  pictures,
  chosen,
  onChoose,
  keys,
}: {
  name: string
  pictures: CandidatePictures
  chosen: number
  onChoose: (index: number) => void
  /** Whether number keys work here, so that slides show theirs. */
  keys: boolean
}) {
  const { views, geometry } = pictures
  const view = views[chosen] ?? views[0]
  if (!view)
    return <div className="night grid aspect-square place-items-center rounded-tray bg-tray text-mute">No views</div>
  return (
    <div className="@container">
      <figure
        style={{ '--slide': slideWidth(views.length) } as CSSProperties}
        className="night grid gap-2 rounded-tray bg-tray p-2 text-text sm:grid-cols-[minmax(0,1fr)_var(--slide)]"
      >
        <div className="min-w-0">
          <StampFigure
            src={view.url}
            alt={`${view.label} of ${name}`}
            width={view.width}
            height={view.height}
            geometry={geometry}
          />
          <figcaption className="px-0.5 pt-1.5 text-note text-tray-text">
            {view.label}
            {view.note ? <span className="text-text">. {view.note}</span> : null}
          </figcaption>
        </div>
        <ol aria-label="Views" className="flex gap-2 overflow-x-auto p-0.5 sm:flex-col sm:gap-1 sm:overflow-x-visible">
          {views.map((slide, index) => (
            <li key={slide.key} className="w-17 shrink-0 sm:w-full">
              <button
                type="button"
                aria-pressed={index === chosen}
                aria-label={`Show ${slide.label}`}
                onClick={() => onChoose(index)}
                className={`block w-full rounded-key p-0.5 ring-1 ${
                  index === chosen ? 'bg-raise ring-lamp' : 'ring-transparent hover:ring-edge'
                }`}
              >
                <StampFigure
                  src={slide.url}
                  alt=""
                  width={slide.width}
                  height={slide.height}
                  geometry={null}
                  overlay={false}
                  className="[&>p]:p-0 [&>p]:text-[0.625rem] [&>p]:leading-tight"
                />
                <span className="block truncate px-0.5 pt-0.5 text-left text-[0.6875rem] leading-4 text-tray-text">
                  {keys && index < 9 ? (
                    <kbd aria-hidden="true" className="figures mr-1 hidden font-semibold text-text lg:inline">
                      {index + 1}
                    </kbd>
                  ) : null}
                  {slide.label}
                </span>
              </button>
            </li>
          ))}
        </ol>
      </figure>
    </div>
  )
}

/**
 * So wide that the column of slides is as high as the large picture: n slides of width s with captions, beside a square of
 * what is left of the tray's width.
 */
function slideWidth(views: number): string {
  return `clamp(3rem, calc((100cqw - ${1.75 * views}rem) / ${views + 1}), 7rem)`
}
