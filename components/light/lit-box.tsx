'use client'

import { lazy, Suspense, useEffect, useRef, type ReactNode } from 'react'
import { StampOverlay } from '@/components/ui/stamp-overlay'
import type { StampGeometry } from '@/lib/science/imaging/stamp-geometry'
import type { LightStore } from './light-store'
import { usePanAndPinch } from './use-pan-and-pinch'
import { useInUse, useZoomScale } from './use-light'

const LightCanvas = lazy(() => import('./light-canvas'))

/**
 * What fills the black square of a large picture: the pictures that the recipe made, Light's canvas over them while it is in
 * use, both as close as the zoom says, and the scale bar and compass, which stay in their corners.
 */
export function LitBox({
  light,
  planesUrl,
  view,
  size,
  geometry,
  scrolls,
  children,
}: {
  light: LightStore
  planesUrl: string | null
  /** Key of the view that is shown. */
  view: string
  /** Pixels of its picture; null draws no scale bar and compass. */
  size: { width: number; height: number } | null
  geometry: StampGeometry | null
  /** The page scrolls, so one finger that moves up or down is the page's while the picture is whole. */
  scrolls: boolean
  children: ReactNode
}) {
  const box = useRef<HTMLDivElement>(null)
  const layer = useRef<HTMLDivElement>(null)
  const inUse = useInUse(light)
  usePanAndPinch(box, light)
  useEffect(() => {
    const follow = () => {
      const { zoom } = light
      if (layer.current) layer.current.style.transform = zoom.transform
      if (box.current) {
        box.current.style.touchAction = scrolls && zoom.scale === 1 ? 'pan-y' : 'none'
        box.current.style.cursor = zoom.scale > 1 ? 'grab' : ''
      }
    }
    follow()
    return light.zoom.subscribe(follow)
  }, [light, scrolls])
  return (
    <div ref={box} className="absolute inset-0">
      <div ref={layer} className="absolute inset-0">
        {children}
        {inUse && planesUrl ? (
          <Suspense fallback={null}>
            <LightCanvas light={light} planesUrl={planesUrl} view={view} />
          </Suspense>
        ) : null}
      </div>
      {size && geometry ? <ZoomedOverlay light={light} size={size} geometry={geometry} /> : null}
    </div>
  )
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
        <p className="figures pointer-events-none absolute right-2 top-1.5 text-note text-white [text-shadow:0_0_2px_#000]">
          {Number(scale.toFixed(1))}×
        </p>
      ) : null}
    </>
  )
}
