import type { FittedImage } from '@/lib/work/measuring/fitted'
import { arcsec, delayInWords, magnificationInWords } from './in-figures'

/** The images of the source's middle, in the order in which a change of the source shows in them. */
export function ImagesTable({ images, delays }: { images: readonly FittedImage[]; delays: boolean }) {
  if (images.length === 0) {
    return (
      <p className="text-note text-mute">
        A ring: the source lies exactly behind a round lens, so no image is a point.
      </p>
    )
  }
  const total = images.reduce((sum, { magnification }) => sum + Math.abs(magnification ?? Number.POSITIVE_INFINITY), 0)
  return (
    <div role="region" aria-label="Images of the model" tabIndex={0} className="relative overflow-x-auto">
      <table className="figures w-full text-note">
        <caption className="pb-1 text-left font-sans text-note text-mute">
          {images.length} {images.length === 1 ? 'image' : 'images'}
          {total < 1000 ? `, magnified ${total.toFixed(1)} times in all` : ''}
        </caption>
        <thead>
          <tr className="border-b border-line text-right font-sans text-mute">
            <th scope="col" className="py-1 text-left font-normal">
              East, north
            </th>
            <th scope="col" className="py-1 font-normal">
              Magnified
            </th>
            <th scope="col" className="py-1 font-normal">
              Parity
            </th>
            {delays ? (
              <th scope="col" className="py-1 font-normal">
                Delay
              </th>
            ) : null}
          </tr>
        </thead>
        <tbody>
          {images.map(({ east, north, magnification, kind, delayDays }) => (
            <tr key={`${east} ${north}`} className="border-b border-line/60 text-right">
              <td className="py-1 text-left whitespace-nowrap">
                {arcsec(east)}, {arcsec(north)}
              </td>
              <td>{magnificationInWords(magnification)}</td>
              <td
                className="whitespace-nowrap"
                title={kind === 'minimum' ? 'minimum of the arrival time' : 'saddle point: mirrored'}
              >
                {kind === 'minimum' ? '+' : '− mirrored'}
              </td>
              {delays ? (
                <td className="whitespace-nowrap pl-2">{delayDays === null ? '' : delayInWords(delayDays)}</td>
              ) : null}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  )
}
