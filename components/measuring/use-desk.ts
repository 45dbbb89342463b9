'use client'

import { useState, useSyncExternalStore } from 'react'
import type { LightStore } from '@/components/light/light-store'
import { useClose } from '@/components/light/use-light'
import { closeFactor } from '@/lib/science/imaging/close-field'
import type { PictureView } from '@/lib/work/stamps/candidate-pictures'
import type { DeskState, Given, Mode } from './desk-state'
import { DeskStore } from './desk-store'
import type { Frame } from './frame'

export function useDeskStore(given: Given, closeFieldArcsec: number): DeskStore {
  const [desk] = useState(() => new DeskStore(given, closeFieldArcsec))
  return desk
}

export const useDesk = (desk: DeskStore): DeskState => useSyncExternalStore(desk.subscribe, desk.get, desk.get)

/** What changes the page around the desk: renders only when it does. */
export function useMode(desk: DeskStore): Mode {
  const mode = () => desk.get().mode
  return useSyncExternalStore(desk.subscribe, mode, mode)
}

export function useWide(desk: DeskStore): boolean {
  const wide = () => desk.get().wide
  return useSyncExternalStore(desk.subscribe, wide, wide)
}

/** How the sky lies in the picture's box now; null where the scale of the view is not known. */
export function useFrame(light: LightStore, view: PictureView, closeFieldArcsec: number, wide: boolean): Frame | null {
  const close = useClose(light)
  useSyncExternalStore(
    light.zoom.subscribe,
    () => `${light.zoom.scale} ${light.zoom.x} ${light.zoom.y}`,
    () => '',
  )
  const scale = view.geometry.pixelScaleArcsec
  const side = Math.max(view.width, view.height)
  if (scale === null || side === 0) return null
  const { scale: times, x, y } = light.zoom
  return {
    side,
    geometry: view.geometry,
    closer: close ? closeFactor(side, scale, closeFieldArcsec) : 1,
    zoom: { scale: times, x, y },
    wide,
  }
}
