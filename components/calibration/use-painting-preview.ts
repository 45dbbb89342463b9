'use client'

import { useEffect, useState } from 'react'
import type { PaintingRanges } from '@/lib/science/lensing/painting/painting-ranges'
import type { PaintedSample } from '@/lib/work/calibration/preview-painting'
import { askPreview, Refused } from './calibration-api'

/** Painting takes longer than drawing: long enough that typing a number asks once. */
const PAUSE_MS = 350

export interface PaintingPreview {
  samples: PaintedSample[]
  pending: boolean
  fault: string | null
  /** Sentences by the path of the field. */
  errors: Record<string, string>
}

const NOTHING: PaintingPreview = { samples: [], pending: false, fault: null, errors: {} }

/** A few galaxies as they would be painted over. The last ones stay while new ones are on their way. */
export function usePaintingPreview(
  slug: string,
  ranges: PaintingRanges,
  galaxies: readonly number[],
  seed: number,
): PaintingPreview {
  const [preview, setPreview] = useState<PaintingPreview>(NOTHING)
  const asked = JSON.stringify({ ranges, galaxies, seed })
  useEffect(() => {
    const input = JSON.parse(asked) as { ranges: PaintingRanges; galaxies: number[]; seed: number }
    if (input.galaxies.length === 0) return
    const gone = new AbortController()
    const timer = setTimeout(async () => {
      setPreview((last) => ({ ...last, pending: true }))
      try {
        const { samples } = await askPreview(slug, input, gone.signal)
        setPreview({ ...NOTHING, samples })
      } catch (error) {
        if (gone.signal.aborted) return
        const fault = error instanceof Error ? error.message : String(error)
        const errors = error instanceof Refused ? error.fields : {}
        setPreview((last) => ({ ...last, pending: false, fault, errors }))
      }
    }, PAUSE_MS)
    return () => {
      clearTimeout(timer)
      gone.abort()
    }
  }, [slug, asked])
  return galaxies.length === 0 ? NOTHING : preview
}
