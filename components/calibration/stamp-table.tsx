import Link from 'next/link'
import { counted } from '@/components/campaigns/in-words'
import type { CalibrationPage } from '@/lib/work/calibration/calibration-page'

/** The stamps that there are, with their truth and what people made of them: for leads' eyes. */
export function StampTable({ slug, stamps }: { slug: string; stamps: CalibrationPage['stamps'] }) {
  const head = 'px-2 py-1.5 text-left font-normal'
  return (
    <div className="overflow-x-auto">
      <table className="w-full min-w-[40rem] border-collapse text-small">
        <caption className="sr-only">Calibration stamps, the newest first</caption>
        <thead>
          <tr className="border-b border-line text-note text-mute">
            <th scope="col" className={head}>
              Name
            </th>
            <th scope="col" className={head}>
              Truth
            </th>
            <th scope="col" className={head}>
              Made of
            </th>
            <th scope="col" className={head}>
              Graded A, B or C
            </th>
            <th scope="col" className={head}>
              What practice says of it
            </th>
          </tr>
        </thead>
        <tbody>
          {stamps.map((stamp) => (
            <tr key={stamp.id} className="border-b border-line align-top">
              <th scope="row" className="figures whitespace-nowrap px-2 py-1.5 text-left font-normal">
                <Link
                  prefetch={false}
                  href={`/campaigns/${slug}/candidates/${stamp.id}`}
                  className="underline decoration-line underline-offset-4 hover:decoration-text"
                >
                  {stamp.name}
                </Link>
              </th>
              <td className="whitespace-nowrap px-2 py-1.5">{stamp.truth === 'lens' ? 'Lens' : 'Not a lens'}</td>
              <td className="figures whitespace-nowrap px-2 py-1.5 text-mute">
                {stamp.paintedOver ? `${stamp.isPainted ? 'painted over ' : ''}${stamp.paintedOver}` : 'delivered'}
              </td>
              <td className="figures whitespace-nowrap px-2 py-1.5">
                {stamp.isImaged ? (
                  stamp.grades === 0 ? (
                    <span className="text-mute">no looks yet</span>
                  ) : (
                    `${stamp.takenForLens} of ${counted(stamp.grades, 'look')}`
                  )
                ) : (
                  <span className="text-mute">pictures to come</span>
                )}
              </td>
              <td className="px-2 py-1.5 text-note text-mute">{stamp.explanation}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  )
}
