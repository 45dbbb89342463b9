import { useState, type CSSProperties, type ReactNode } from 'react'
import type { LightStore } from '@/components/light/light-store'
import { LitBox } from '@/components/light/lit-box'
import { Button } from '@/components/ui/button'
import { closeFactor } from '@/lib/science/imaging/close-field'
import type { BenchCandidate } from '@/lib/work/queue/lend-next'
import { useClose } from '@/components/light/use-light'
import { MeasureLayer } from './measure-layer'
import type { Tool } from './measuring'
import { useHoldAndSwipe } from './use-hold-and-swipe'
import { useMeasuring } from './use-measuring'

/** Small pictures grow in whole steps of their pixels, larger ones in halves and quarters, so that pixels stay even. */
function growthStep(longerSide: number): number {
  return longerSide <= 130 ? longerSide : longerSide <= 260 ? longerSide / 2 : longerSide / 4
}

/** On fine screens half steps are whole ones of their pixels. */
const WIDTH = 'round(down, min(100cqw, 100cqh), var(--step))'

/**
 * The stamp, as large as the window allows. All views of the candidate lie on top of each other and one is visible, so that
 * changing and blinking never wait. Holding it down blinks, sweeping sideways changes the view.
 */
export function Stage({
  candidate,
  shown,
  light,
  tool,
  onLeaveTool,
  onSeen,
  onBlink,
  onSweep,
}: {
  candidate: BenchCandidate
  shown: string | null
  light: LightStore
  /** Ruler or circle, in use over the picture. */
  tool: Tool | null
  onLeaveTool: () => void
  /** The view that is shown has its picture. */
  onSeen: () => void
  onBlink: (on: boolean) => void
  onSweep: (step: 1 | -1) => void
}) {
  const [broken, setBroken] = useState<readonly string[]>([])
  const [attempt, setAttempt] = useState(0)
  const hold = useHoldAndSwipe(onBlink, onSweep)
  const view = candidate.views.find(({ key }) => key === shown) ?? candidate.views[0]
  const longest = Math.max(1, ...candidate.views.map(({ width, height }) => Math.max(width, height)))
  const side = Math.max(1, view?.width ?? 0, view?.height ?? 0)
  const scale = view?.geometry.pixelScaleArcsec ?? null
  const closer = useClose(light) ? closeFactor(side, scale, candidate.closeFieldArcsec) : 1
  const { measuring, reading, pointer } = useMeasuring({
    tool,
    picture: { side, geometry: view?.geometry ?? candidate.geometry, raDeg: candidate.raDeg, decDeg: candidate.decDeg },
    shown: () => closer * light.zoom.scale,
    onLeave: onLeaveTool,
  })
  const missing = view?.url ? broken.includes(view.url) : false
  return (
    <figure className="flex min-h-0 min-w-0 flex-1 flex-col">
      <div className="grid min-h-0 flex-1 place-items-center px-2 [container-type:size] md:px-6 short:px-1">
        <div
          {...hold}
          className="relative aspect-square w-[min(100cqw,100cqh)] [--step:var(--whole)] [@media(min-resolution:2dppx)]:[--step:calc(var(--whole)/2)] select-none overflow-hidden bg-black [-webkit-touch-callout:none]"
          style={{ '--whole': `${growthStep(longest)}px`, width: WIDTH } as CSSProperties}
        >
          <LitBox
            light={light}
            planesUrl={missing ? null : candidate.planesUrl}
            view={view?.key ?? ''}
            size={view?.url && !missing ? view : null}
            geometry={view?.geometry ?? null}
            closeFieldArcsec={candidate.closeFieldArcsec}
            scrolls={false}
            turned={candidate.turned}
          >
            {candidate.views.map(({ key, label, url, width, height }) =>
              url ? (
                <img
                  key={`${key} ${attempt}`}
                  ref={(image) => {
                    if (key === view?.key && image?.complete && image.naturalWidth > 0) onSeen()
                  }}
                  src={url}
                  alt={key === view?.key ? `${candidate.name}, ${label}` : ''}
                  aria-hidden={key !== view?.key}
                  width={width}
                  height={height}
                  decoding="sync"
                  draggable={false}
                  onLoad={() => void (key === view?.key && onSeen())}
                  onError={() => setBroken((old) => [...old, url])}
                  className={`pixelated absolute inset-0 size-full object-contain ${key === view?.key && !missing ? '' : 'invisible'}`}
                />
              ) : null,
            )}
          </LitBox>
          {tool && measuring ? (
            <MeasureLayer tool={tool} measuring={measuring} pointer={pointer} light={light} closer={closer} />
          ) : null}
          {view?.url ? null : <Absent>There is no picture of this view.</Absent>}
          {missing ? (
            <Absent>
              This picture did not load.
              <Button
                onClick={() => {
                  setBroken([])
                  setAttempt(attempt + 1)
                }}
              >
                Load it again
              </Button>
            </Absent>
          ) : null}
        </div>
      </div>
      {/* Room for two lines always, so that the picture keeps its size whatever there is to know of it. */}
      <figcaption className="flex h-9 shrink-0 short:h-6 items-center justify-center px-3 text-center text-note leading-4 text-tray-text">
        {reading ? (
          <span className="line-clamp-2">
            <span role="status" className="figures text-text">
              {reading}
            </span>
            <span className="max-md:hidden short:hidden"> · arrows move it, Enter takes the other end, Esc leaves</span>
          </span>
        ) : (
          <span className="line-clamp-2" title={view?.note ?? undefined}>
            {view?.note ?? ''}
          </span>
        )}
      </figcaption>
    </figure>
  )
}

function Absent({ children }: { children: ReactNode }) {
  return (
    <div className="absolute inset-0 flex flex-col items-center justify-center gap-3 p-6 text-center text-small text-tray-text">
      {children}
    </div>
  )
}
