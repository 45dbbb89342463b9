import { StampFigure } from '@/components/ui/stamp-figure'
import type { PaintedSample } from '@/lib/work/calibration/preview-painting'

/** Painted samples on the black tray: the picture as graders see it, and beside it the galaxy's light taken off. */
export function PaintedTray({ samples, pending }: { samples: PaintedSample[]; pending: boolean }) {
  return (
    <div
      aria-busy={pending}
      className={`night grid gap-4 rounded-tray bg-tray p-3 text-text sm:grid-cols-2 ${pending ? 'opacity-70' : ''}`}
    >
      {samples.map(({ id, name, views, explanation, fault }) => (
        <figure key={id} className="flex min-w-0 flex-col gap-1.5">
          <div className="grid grid-cols-2 gap-1.5">
            {views.slice(0, 2).map((view) => (
              <StampFigure
                key={view.key}
                src={view.url}
                alt={`${name} painted over, ${view.key}`}
                width={view.width}
                height={view.height}
                geometry={null}
                overlay={false}
              />
            ))}
          </div>
          <figcaption className="text-note text-tray-text">
            <span className="figures text-text">{name}</span> {fault ?? explanation}
          </figcaption>
        </figure>
      ))}
    </div>
  )
}
