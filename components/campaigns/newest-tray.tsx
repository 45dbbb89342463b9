import Link from 'next/link'
import { StampFigure } from '@/components/ui/stamp-figure'
import type { StampGeometry } from '@/lib/science/imaging/stamp-geometry'

export interface TrayStamp {
  id: number
  name: string
  url: string | null
  width: number
  height: number
  geometry: StampGeometry | null
}

/** The candidates confirmed last, as pictures on the black tray. */
export function NewestTray({ stamps, campaignPath }: { stamps: TrayStamp[]; campaignPath: string }) {
  return (
    <ul className="night grid grid-cols-[repeat(auto-fill,minmax(6.5rem,1fr))] gap-3 rounded-tray bg-tray p-3">
      {stamps.map((stamp) => (
        <li key={stamp.id}>
          <Link href={`${campaignPath}/candidates/${stamp.id}`} className="group flex flex-col gap-1">
            <StampFigure
              src={stamp.url}
              alt={`Colour stamp of ${stamp.name}`}
              width={stamp.width}
              height={stamp.height}
              geometry={stamp.geometry}
              overlay={false}
            />
            <span className="figures truncate text-note text-tray-text group-hover:text-text">{stamp.name}</span>
          </Link>
        </li>
      ))}
    </ul>
  )
}
