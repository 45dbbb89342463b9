import { useRef, useSyncExternalStore, type PointerEvent } from 'react'
import type { LightStore } from '@/components/light/light-store'
import type { Measuring, Place, Tool } from './measuring'
import type { useMeasuring } from './use-measuring'

/** Share of the box that an end's open ring takes to each side. */
const RING = 1.7

/**
 * Ruler or circle over the picture, following its zoom. Thin lines and open rings: nothing of it lies over what is measured. What
 * it reads stands below the picture.
 */
export function MeasureLayer({
  tool,
  measuring,
  pointer,
  light,
  closer,
}: {
  tool: Tool
  measuring: Measuring
  pointer: ReturnType<typeof useMeasuring>['pointer']
  light: LightStore
  /** How many times closer the field of view brings it. */
  closer: number
}) {
  const box = useRef<HTMLDivElement>(null)
  useSyncExternalStore(
    light.zoom.subscribe,
    () => `${light.zoom.scale} ${light.zoom.x} ${light.zoom.y}`,
    () => '',
  )
  const { scale, x, y } = light.zoom
  const toScreen = (place: Place): Place => ({
    x: 100 * (0.5 + scale * ((place.x - 0.5) * closer - x)),
    y: 100 * (0.5 + scale * ((place.y - 0.5) * closer - y)),
  })
  const placeOf = ({ clientX, clientY }: PointerEvent): Place => {
    const { left, top, width, height } = box.current!.getBoundingClientRect()
    return {
      x: 0.5 + ((clientX - left) / (width || 1) - 0.5) / scale / closer + x / closer,
      y: 0.5 + ((clientY - top) / (height || 1) - 0.5) / scale / closer + y / closer,
    }
  }
  const [first, second] = measuring.places.map(toScreen)
  const marks = { tool, first, second, held: measuring.held }
  return (
    <div
      ref={box}
      data-tool={tool}
      onPointerDown={(event) => pointer.down(event, placeOf(event))}
      onPointerMove={(event) => pointer.move(event, placeOf(event))}
      onPointerUp={pointer.up}
      onPointerCancel={pointer.up}
      className="absolute inset-0 cursor-crosshair touch-none"
    >
      <svg
        viewBox="0 0 100 100"
        className="pointer-events-none absolute inset-0 size-full"
        fill="none"
        strokeWidth="1.25"
        aria-hidden="true"
      >
        {/* A dark line under the light one: seen on sky and on the core of a galaxy alike. */}
        <g className="text-black" stroke="currentColor" opacity="0.7">
          <Marks {...marks} wider={2} />
        </g>
        <g className="text-white" stroke="currentColor">
          <Marks {...marks} wider={0} />
        </g>
      </svg>
    </div>
  )
}

/** Thin lines and open rings; what is held is drawn stronger. */
function Marks({
  tool,
  first,
  second,
  held,
  wider,
}: {
  tool: Tool
  first: Place
  second: Place
  held: 0 | 1
  wider: number
}) {
  const strong = (end: 0 | 1) => (held === end ? 2.5 : 1.25) + wider
  const line = { vectorEffect: 'non-scaling-stroke', strokeDasharray: '4 5' }
  if (tool === 'circle') {
    return (
      <>
        <circle cx={first.x} cy={first.y} r={second.x - first.x} {...line} strokeWidth={strong(1)} />
        <path
          d={`M${first.x - 2.4} ${first.y}h1.6m1.6 0h1.6M${first.x} ${first.y - 2.4}v1.6m0 1.6v1.6`}
          strokeWidth={strong(0)}
          vectorEffect="non-scaling-stroke"
        />
      </>
    )
  }
  const length = Math.hypot(second.x - first.x, second.y - first.y)
  const gap = length > 2 * RING ? RING / length : 0.5
  const between = (share: number) =>
    `${first.x + (second.x - first.x) * share} ${first.y + (second.y - first.y) * share}`
  return (
    <>
      <path d={`M${between(gap)}L${between(1 - gap)}`} {...line} strokeWidth={1.25 + wider} />
      {([first, second] as const).map((at, end) => (
        <circle
          key={end}
          cx={at.x}
          cy={at.y}
          r={RING}
          strokeWidth={strong(end as 0 | 1)}
          vectorEffect="non-scaling-stroke"
        />
      ))}
    </>
  )
}
