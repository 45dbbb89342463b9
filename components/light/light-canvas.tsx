'use client'

import { useEffect, useLayoutEffect, useRef } from 'react'
import { LightEngine } from './light-engine'
import type { LightStore } from './light-store'
import { loadPlanes, readyPlanes } from './planes-cache'

/** Over the picture that the recipe made, once the pixels are here and where the view can be made of them. */
export default function LightCanvas({
  light,
  planesUrl,
  view,
}: {
  light: LightStore
  planesUrl: string
  view: string
}) {
  const ref = useRef<HTMLCanvasElement>(null)
  const engine = useRef<LightEngine | null>(null)
  useLayoutEffect(() => {
    if (!ref.current) return
    const made = new LightEngine(ref.current, light)
    engine.current = made
    const ready = readyPlanes(planesUrl)
    if (ready) made.setPlanes(ready)
    return () => {
      engine.current = null
      made.dispose()
    }
  }, [light, planesUrl])
  useEffect(() => {
    let gone = false
    loadPlanes(planesUrl).then(
      (planes) => {
        if (!gone && readyPlanes(planesUrl) === planes) engine.current?.setPlanes(planes)
      },
      (error: unknown) => {
        if (!gone) light.setStatus({ failed: error instanceof Error ? error.message : String(error) }, null)
      },
    )
    return () => {
      gone = true
    }
  }, [planesUrl, light])
  useLayoutEffect(() => engine.current?.show(view), [light, planesUrl, view])
  return <canvas ref={ref} hidden aria-hidden="true" className="pixelated absolute inset-0 size-full object-contain" />
}
