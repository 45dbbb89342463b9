import { closeFactor } from '@/lib/science/imaging/close-field'
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
  fieldArcsec = null,
}: {
  src: string | null
  alt: string
  width: number
  height: number
  geometry: StampGeometry | null
  className?: string
  overlay?: boolean
  /** Side of the part in the middle that is shown; null shows the whole picture, as does a picture of unknown scale. */
  fieldArcsec?: number | null
}) {
  const closer =
    fieldArcsec === null ? 1 : closeFactor(Math.max(width, height), geometry?.pixelScaleArcsec ?? null, fieldArcsec)
  return (
    <div className={`relative aspect-square overflow-hidden bg-black ${className}`}>
      {src ? (
        <img
          src={src}
          alt={alt}
          width={width}
          height={height}
          className="pixelated absolute inset-0 size-full object-contain"
          style={closer > 1 ? { transform: `scale(${closer})` } : undefined}
          draggable={false}
        />
      ) : (
        <p className="absolute inset-0 grid place-items-center p-4 text-center text-small text-tray-text">
          No picture yet
        </p>
      )}
      {overlay && src && geometry ? (
        <StampOverlay width={width / closer} height={height / closer} geometry={geometry} />
      ) : null}
    </div>
  )
}
