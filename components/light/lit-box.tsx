'use client'

import { lazy, Suspense, useLayoutEffect, useRef, type ReactNode } from 'react'
import { StampOverlay } from '@/components/ui/stamp-overlay'
import { closeFactor } from '@/lib/science/imaging/close-field'
import { CLOSE_FIELD_ARCSEC } from '@/lib/science/imaging/recipe'
import type { StampGeometry } from '@/lib/science/imaging/stamp-geometry'
import type { LightStore } from './light-store'
import { turnedStyle } from './turned'
import { usePanAndPinch } from './use-pan-and-pinch'
import { useClose, useInUse, useZoomScale } from './use-light'

const LightCanvas = lazy(() => import('./light-canvas'))

/**
 * What fills the black square of a large picture: the pictures that the recipe made, Light's canvas over them while it is in
 * use, both cut to the field of view and as close as the zoom says, and the scale bar and compass, which stay in their corners.
 */
export function LitBox({
  light,
  planesUrl,
  view,
  size,
  geometry,
  closeFieldArcsec = CLOSE_FIELD_ARCSEC,
  scrolls,
  turned,
  children,
}: {
  light: LightStore
  planesUrl: string | null
  /** Key of the view that is shown. */
  view: string
  /** Pixels of its picture; null draws no scale bar and compass. */
  size: { width: number; height: number } | null
  /** Of the view that is shown. */
  geometry: StampGeometry | null
  closeFieldArcsec?: number
  /** The page scrolls, so one finger that moves up or down is the page's while the picture is whole. */
  scrolls: boolean
  /** The picture is shown turned; scale bar and compass are given as they are then. */
  turned?: number
  children: ReactNode
}) {
  const box = useRef<HTMLDivElement>(null)
  const layer = useRef<HTMLDivElement>(null)
  const inUse = useInUse(light)
  const close = useClose(light)
  const scale = geometry?.pixelScaleArcsec ?? null
  const closer = close && size ? closeFactor(Math.max(size.width, size.height), scale, closeFieldArcsec) : 1
  usePanAndPinch(box, light)
  useLayoutEffect(() => {
    const follow = () => {
      const { zoom } = light
      // The field is cut first, then what is left is zoomed.
      const zoomed = zoom.scale === 1 ? [] : [zoom.transform]
      const steps = closer > 1 ? [...zoomed, `scale(${closer})`] : zoomed
      if (layer.current) layer.current.style.transform = steps.join(' ') || 'none'
      if (box.current) {
        box.current.style.touchAction = scrolls && zoom.scale === 1 ? 'pan-y' : 'none'
        box.current.style.cursor = zoom.scale > 1 ? 'grab' : ''
      }
    }
    follow()
    return light.zoom.subscribe(follow)
  }, [light, scrolls, closer])
  const pictures = (
    <>
      {children}
      {inUse && planesUrl ? (
        <Suspense fallback={null}>
          <LightCanvas light={light} planesUrl={planesUrl} view={view} />
        </Suspense>
      ) : null}
    </>
  )
  return (
    <div ref={box} className="absolute inset-0">
      <div ref={layer} className="absolute inset-0">
        {turned ? (
          <div className="absolute inset-0" style={turnedStyle(turned)}>
            {pictures}
          </div>
        ) : (
          pictures
        )}
      </div>
      {size && geometry ? (
        <ZoomedOverlay
          light={light}
          size={{ width: size.width / closer, height: size.height / closer }}
          geometry={geometry}
        />
      ) : null}
      {close && size ? (
        <p className="figures pointer-events-none absolute left-2 top-1.5 text-note text-white [text-shadow:0_0_2px_black]">
          {closer > 1 ? `${closeFieldArcsec}″ field` : wholeBecause(size, scale, closeFieldArcsec)}
        </p>
      ) : null}
    </div>
  )
}

/** Why the whole cutout is shown although the close field is asked for. */
function wholeBecause(
  { width, height }: { width: number; height: number },
  scale: number | null,
  field: number,
): string {
  if (scale === null) return 'Whole: its scale is unknown'
  return `Whole, ${Number((Math.max(width, height) * scale).toFixed(1))}″: no wider than the ${field}″ field`
}

/** At four times the zoom the box shows a quarter of the picture's side. */
function ZoomedOverlay({
  light,
  size,
  geometry,
}: {
  light: LightStore
  size: { width: number; height: number }
  geometry: StampGeometry
}) {
  const scale = useZoomScale(light)
  return (
    <>
      <StampOverlay width={size.width / scale} height={size.height / scale} geometry={geometry} />
      {scale > 1 ? (
        <p className="figures pointer-events-none absolute right-2 top-1.5 text-note text-white [text-shadow:0_0_2px_black]">
          {Number(scale.toFixed(1))}×
        </p>
      ) : null}
    </>
  )
}
