'use client'

import { useEffect, useState } from 'react'
import type { Recipe } from '@/lib/science/imaging/recipe'
import type { SamplePreview } from '@/lib/work/stamps/preview-recipe'
import { askPreview, Refused } from './recipe-api'

/** Long enough to drag a slider without a request a step, short enough to seem at once. */
const PAUSE_MS = 180

export interface Preview {
  samples: SamplePreview[]
  pending: boolean
  fault: string | null
  /** Sentences by the path of the field. */
  errors: Record<string, string>
}

const NOTHING: Preview = { samples: [], pending: false, fault: null, errors: {} }

/** The samples as a recipe draws them. While a new drawing is on its way the last one stays; an overtaken request is dropped. */
export function usePreview(slug: string, recipe: Recipe, candidateIds: number[]): Preview {
  const [preview, setPreview] = useState<Preview>(NOTHING)
  const asked = JSON.stringify([recipe, candidateIds])
  useEffect(() => {
    const [what, ids] = JSON.parse(asked) as [Recipe, number[]]
    if (ids.length === 0) return
    const gone = new AbortController()
    const timer = setTimeout(async () => {
      setPreview((last) => ({ ...last, pending: true }))
      try {
        const samples = await askPreview(slug, what, ids, gone.signal)
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
  return candidateIds.length === 0 ? NOTHING : preview
}
