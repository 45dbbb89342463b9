'use client'

import { useEffect, useState, useSyncExternalStore } from 'react'
import { LightStore } from './light-store'

/** Light of this person in this campaign; what the browser remembers comes in after the first paint. */
export function useLight(personId: number, slug: string): LightStore {
  const [light] = useState(() => new LightStore(`ringside:light:${personId}:${slug}`))
  useEffect(() => light.load(), [light])
  return light
}

const never = () => false

/** One fact of Light: renders only when it changes. `read` gives a string, a number or a boolean. */
export function useLightFact<T extends string | number | boolean>(
  light: LightStore,
  read: (light: LightStore) => T,
): T {
  return useSyncExternalStore(
    light.subscribe,
    () => read(light),
    () => read(light),
  )
}

export const useInUse = (light: LightStore): boolean => useSyncExternalStore(light.subscribe, () => light.inUse, never)

export const useClose = (light: LightStore): boolean => useSyncExternalStore(light.subscribe, () => light.close, never)

/** Rounded, so that a pinch does not render each of its steps. */
export const useZoomScale = (light: LightStore): number =>
  useSyncExternalStore(
    light.zoom.subscribe,
    () => Math.round(200 * light.zoom.scale) / 200,
    () => 1,
  )
