import type { StampGeometry } from '@/lib/science/imaging/stamp-geometry'
import { StampOverlay } from './stamp-overlay'

/**
 * One stamp with its scale bar and compass. The box is square and black whatever the picture's size, so nothing moves when
 * pictures change; pixels stay square and unsmoothed.
 */
export function StampFigure({
  src,
  alt,
  width,
  height,
  geometry,
  className = '',
  overlay = true,
}: {
  src: string | null
  alt: string
  width: number
  height: number
  geometry: StampGeometry | null
  className?: string
  overlay?: boolean
}) {
  return (
    <div className={`relative aspect-square overflow-hidden bg-black ${className}`}>
      {src ? (
        <img
          src={src}
          alt={alt}
          width={width}
          height={height}
          className="pixelated absolute inset-0 size-full object-contain"
          draggable={false}
        />
      ) : (
        <p className="absolute inset-0 grid place-items-center p-4 text-center text-small text-tray-text">
          No picture yet
        </p>
      )}
      {overlay && src && geometry ? <StampOverlay width={width} height={height} geometry={geometry} /> : null}
    </div>
  )
}
