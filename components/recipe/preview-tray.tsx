import { StampFigure } from '@/components/ui/stamp-figure'
import type { Sample } from './sample-chooser'
import type { SamplePreview } from '@/lib/work/stamps/preview-recipe'

/**
 * The samples on the black tray: the chosen view large, every other as a slide below it. Where there is no room beside the
 * fields, a row that is pulled sideways and stays in sight above them while a slider moves.
 */
export function PreviewTray({
  wanted,
  samples,
  view,
  fieldArcsec,
  pending,
  onChoose,
}: {
  wanted: Sample[]
  /** As far as they are drawn. */
  samples: SamplePreview[]
  view: string
  /** null: the whole cutout. */
  fieldArcsec: number | null
  pending: boolean
  onChoose: (view: string) => void
}) {
  return (
    <div
      aria-busy={pending}
      className="night sticky top-0 z-10 -order-1 flex snap-x scroll-px-3 gap-3 overflow-x-auto rounded-tray bg-tray p-3 text-text lg:static lg:order-none lg:grid lg:grid-cols-2 lg:overflow-x-visible xl:grid-cols-3"
    >
      {wanted.map(({ id, name }) => {
        const sample = samples.find((one) => one.id === id) ?? { id, name, views: [], fault: null }
        const drawn = sample.views.length > 0 || sample.fault !== null
        const shown = sample.views.find(({ key }) => key === view) ?? null
        return (
          <figure
            key={sample.id}
            className="flex w-[min(44vw,32vh)] min-w-0 shrink-0 snap-start flex-col gap-1.5 lg:w-auto"
          >
            <StampFigure
              // Until it is drawn, the box in which it will be.
              className={drawn ? '' : '[&>p]:hidden'}
              src={shown?.url ?? null}
              alt={`${shown?.label ?? ''} of ${sample.name}`}
              width={shown?.width ?? 1}
              height={shown?.height ?? 1}
              geometry={shown?.geometry ?? null}
              fieldArcsec={fieldArcsec}
            />
            <figcaption className="min-w-0 text-note text-tray-text">
              <span className="figures block truncate text-text">{sample.name}</span>
              {sample.fault ?? shown?.note ?? null}
              {drawn ? null : 'Drawing…'}
            </figcaption>
            <div className="hidden grid-cols-8 gap-1 lg:grid">
              {sample.views.map(({ key, label, url, width, height }) => (
                <button
                  key={key}
                  type="button"
                  title={label}
                  aria-label={`Tune ${label}`}
                  aria-pressed={key === view}
                  onClick={() => onChoose(key)}
                  className="min-h-6 rounded-key outline-2 outline-offset-1 outline-transparent aria-pressed:outline-text"
                >
                  <StampFigure
                    src={url}
                    alt=""
                    width={width}
                    height={height}
                    geometry={null}
                    overlay={false}
                    className="[&>p]:hidden"
                  />
                </button>
              ))}
            </div>
          </figure>
        )
      })}
    </div>
  )
}
