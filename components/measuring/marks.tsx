/** Thin lines and open rings over a picture, in percent of its box: a dark line under a light one is seen on sky and galaxy alike. */
import type { SVGProps } from 'react'
import { lineOf, spotOf, type Frame, type Spot } from './frame'
import type { SkyVector } from '@/lib/science/lensing/sis'

const FIXED = { vectorEffect: 'non-scaling-stroke', fill: 'none' } as const

export function Line({
  d,
  width = 1.5,
  dash,
  className = 'text-white',
  fill,
}: {
  d: string
  width?: number
  dash?: string
  className?: string
  /** Share of white inside, 0 to 1. */
  fill?: number
}) {
  if (d === '') return null
  return (
    <>
      <path d={d} {...FIXED} className="text-black" stroke="currentColor" strokeWidth={width + 2} opacity="0.6" />
      <path
        d={d}
        {...FIXED}
        {...(fill ? { fill: 'currentColor', fillOpacity: fill, fillRule: 'evenodd' as const } : null)}
        className={className}
        stroke="currentColor"
        strokeWidth={width}
        strokeDasharray={dash}
      />
    </>
  )
}

export function SkyLine({
  offsets,
  frame,
  ...rest
}: {
  offsets: readonly SkyVector[]
  frame: Frame
  width?: number
  dash?: string
  className?: string
}) {
  return <Line d={lineOf(offsets, frame)} {...rest} />
}

/** An open ring: nothing lies over what is measured. */
export function Ring({ at, size, strong = false }: { at: Spot; size: number; strong?: boolean }) {
  const d = `M${at.x - size} ${at.y}a${size} ${size} 0 1 0 ${2 * size} 0a${size} ${size} 0 1 0 ${-2 * size} 0Z`
  return <Line d={d} width={strong ? 2.5 : 1.5} className={strong ? 'text-lamp' : 'text-white'} />
}

/** Four strokes that leave the middle free. */
export function Cross({ at, strong = false }: { at: Spot; strong?: boolean }) {
  const [gap, reach] = [0.8, 2.6]
  const d = [
    `M${at.x - reach} ${at.y}H${at.x - gap}`,
    `M${at.x + gap} ${at.y}H${at.x + reach}`,
    `M${at.x} ${at.y - reach}V${at.y - gap}`,
    `M${at.x} ${at.y + gap}V${at.y + reach}`,
  ].join('')
  return <Line d={d} width={strong ? 2.5 : 1.5} className={strong ? 'text-lamp' : 'text-white'} />
}

export function Label({ at, text, size = 3 }: { at: Spot; text: string; size?: number }) {
  const common: SVGProps<SVGTextElement> = { x: at.x, y: at.y, fontSize: size, textAnchor: 'middle' }
  return (
    <text
      {...common}
      className="fill-white stroke-black"
      strokeWidth="0.5"
      paintOrder="stroke"
      dominantBaseline="central"
    >
      {text}
    </text>
  )
}

export function PointMarks({
  points,
  chosen,
  frame,
}: {
  points: readonly SkyVector[]
  chosen: number | null
  frame: Frame
}) {
  return points.map((point, k) => <Ring key={k} at={spotOf(point, frame)} size={1.3} strong={k === chosen} />)
}
