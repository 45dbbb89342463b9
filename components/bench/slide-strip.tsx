import { turnedStyle } from '@/components/light/turned'
import { KeyCap } from '@/components/ui/key-cap'
import type { PictureView } from '@/lib/work/stamps/candidate-pictures'
import { letGo } from './let-go'

/** All views of the candidate as slides along the lower edge; on a phone the strip is pulled sideways. */
export function SlideStrip({
  views,
  shown,
  turned,
  onChoose,
}: {
  views: readonly PictureView[]
  shown: string | null
  turned?: number
  onChoose: (key: string) => void
}) {
  return (
    <div
      role="group"
      aria-label="Views"
      className="flex snap-x scroll-px-3 gap-2.5 overflow-x-auto px-3 py-2 [justify-content:safe_center] md:px-6 md:pt-1 short:flex-col short:overflow-x-hidden short:overflow-y-auto short:px-3 short:pb-2"
    >
      {views.map(({ key, label, url, width, height, note }, index) => (
        <button
          key={key}
          type="button"
          aria-label={`View ${index + 1}: ${label}${url ? '' : ', no picture'}`}
          aria-pressed={key === shown}
          title={note ?? undefined}
          onClick={letGo(() => onChoose(key))}
          className="group w-16 shrink-0 snap-start touch-manipulation text-left text-note text-mute aria-pressed:text-text md:w-[clamp(3.5rem,9.5vh,5.25rem)] short:w-14"
        >
          <span className="block aspect-square overflow-hidden rounded-key border border-line bg-black outline-2 outline-offset-2 outline-transparent group-aria-pressed:outline-text">
            {url ? (
              <img
                src={url}
                alt=""
                width={width}
                height={height}
                draggable={false}
                className="pixelated size-full object-contain"
                style={turnedStyle(turned)}
              />
            ) : (
              <span className="grid size-full place-items-center text-[0.6875rem] text-tray-text">none</span>
            )}
          </span>
          <span className="mt-1.5 block min-h-[2.3em] leading-[1.15] wrap-break-word">
            {index < 9 ? (
              <span className="mr-1.5 hidden md:inline">
                <KeyCap>{String(index + 1)}</KeyCap>
              </span>
            ) : null}
            {label}
          </span>
        </button>
      ))}
    </div>
  )
}
