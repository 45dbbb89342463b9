'use client'

import { useState, type CSSProperties, type ReactNode } from 'react'
import { useHoldAndSwipe } from '@/components/bench/use-hold-and-swipe'
import { LightSection } from '@/components/light/light-section'
import type { LightStore } from '@/components/light/light-store'
import { LitBox } from '@/components/light/lit-box'
import { StampFigure } from '@/components/ui/stamp-figure'
import type { CandidatePictures, PictureView } from '@/lib/work/stamps/candidate-pictures'

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
  viewKeys,
  light,
  blinking,
  over,
  alone = false,
}: {
  name: string
  pictures: CandidatePictures
  chosen: number
  onChoose: (index: number) => void
  /** Whether single keys work, so that what has one shows it. */
  keys: boolean
  /** Whether number keys choose views here. */
  viewKeys: boolean
  light: LightStore
  /** A key is held that shows the view before. */
  blinking: boolean
  /** What lies over the large picture, and how the picture itself is drawn to make room around it. */
  over?: { layer: (view: PictureView) => ReactNode; transform?: string }
  /** On a narrow screen no slides, so that there is room below the picture. */
  alone?: boolean
}) {
  const { views } = pictures
  const [held, setHeld] = useState(false)
  const [before, setBefore] = useState({ chosen, previous: chosen })
  if (before.chosen !== chosen) setBefore({ chosen, previous: before.chosen })
  const hold = useHoldAndSwipe(setHeld, (step) => onChoose((chosen + step + views.length) % views.length))
  const shown = blinking || held ? before.previous : chosen
  const view = views[shown] ?? views[0]
  const paired = views.length > ONE_COLUMN
  if (!view)
    return <div className="night grid aspect-square place-items-center rounded-tray bg-tray text-mute">No views</div>
  return (
    <div className="@container">
      <figure
        style={{ '--slide': slideWidth(views.length), '--pair': pairWidth(views.length) } as CSSProperties}
        className={`night grid gap-2 rounded-tray bg-tray p-2 text-text sm:grid-cols-[minmax(0,1fr)_var(--slide)] ${
          paired ? 'sm:@max-[36rem]:grid-cols-[minmax(0,1fr)_var(--pair)]' : ''
        }`}
      >
        <div className="min-w-0">
          <div {...hold} className="relative aspect-square select-none overflow-hidden bg-black">
            <div className="absolute inset-0" style={{ transform: over?.transform }}>
              <LitBox
                light={light}
                planesUrl={view.url ? pictures.planesUrl : null}
                view={view.key}
                size={view.url ? view : null}
                geometry={view.geometry}
                closeFieldArcsec={pictures.closeFieldArcsec}
                scrolls
              >
                <StampFigure
                  src={view.url}
                  alt={`${view.label} of ${name}`}
                  width={view.width}
                  height={view.height}
                  geometry={null}
                />
              </LitBox>
            </div>
            {view.url ? over?.layer(view) : null}
          </div>
          <figcaption className="px-0.5 pt-1.5 text-note text-tray-text">
            {view.label}
            {view.note ? <span className="text-text">. {view.note}</span> : null}
          </figcaption>
          <LightSection light={light} keys={keys} className="px-0.5 pt-1" />
        </div>
        <ol
          aria-label="Views"
          className={`${alone ? 'max-sm:hidden' : ''} flex gap-2 overflow-x-auto p-0.5 sm:flex-col sm:gap-1 sm:overflow-x-visible ${
            paired ? 'sm:@max-[36rem]:grid sm:@max-[36rem]:grid-cols-2 sm:@max-[36rem]:content-start' : ''
          }`}
        >
          {views.map((slide, index) => (
            <li key={slide.key} className="w-17 shrink-0 sm:w-full">
              <button
                type="button"
                aria-pressed={index === chosen}
                aria-label={`Show ${slide.label}`}
                onClick={() => onChoose(index)}
                className={`relative block w-full rounded-key p-0.5 ring-1 ${
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
                {keys && viewKeys && index < 9 ? (
                  <kbd
                    aria-hidden="true"
                    className="figures absolute top-0.5 left-0.5 hidden rounded-br-key bg-tray/80 px-1 text-[0.6875rem] leading-4 font-semibold text-text lg:block"
                  >
                    {index + 1}
                  </kbd>
                ) : null}
                <span className="block pt-0.5 text-left text-[0.6875rem] leading-[1.2] wrap-break-word text-tray-text">
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

/** Slides that have room in one column beside a small picture; more of them stand in pairs there. */
const ONE_COLUMN = 5

/** Two columns beside a small picture, as high as it together with its caption. */
function pairWidth(views: number): string {
  const rows = Math.ceil(views / 2)
  return `calc(2 * clamp(2.75rem, (100cqw - ${2 * rows}rem) / ${rows + 2}, 7rem) + 0.5rem)`
}

/**
 * So wide that the column of slides is as high as the large picture: n slides of width s with captions, beside a square of
 * what is left of the tray's width.
 */
function slideWidth(views: number): string {
  return `clamp(3.25rem, calc((100cqw - ${2 * views}rem) / ${views + 1}), 7rem)`
}
