'use client'

import { useRouter } from 'next/navigation'
import { useEffect, useEffectEvent, useState } from 'react'
import { counted } from '@/components/campaigns/in-words'
import { ProgressBar } from '@/components/ui/progress-bar'
import { Notice } from '@/components/ui/notice'
import type { RecipeProgress } from '@/lib/work/stamps/recipe-versions'
import { askProgress } from './recipe-api'

const EVERY_MS = 1500

/** How far the pictures have followed the recipe in force; asked again while the work goes on. */
export function ImagingProgress({ slug, first }: { slug: string; first: RecipeProgress }) {
  const router = useRouter()
  const [told, setTold] = useState<RecipeProgress | null>(null)
  // The page knows of a newer version before the next answer does.
  const now = told && told.version >= first.version ? told : first
  const { version, candidates, imaged, working } = now
  const ask = useEffectEvent(async () => {
    const answer = await askProgress(slug).catch(() => null)
    if (!answer) return
    setTold(answer)
    if (!answer.working) router.refresh()
  })
  useEffect(() => {
    if (!working) return
    const timer = setInterval(() => void ask(), EVERY_MS)
    return () => clearInterval(timer)
  }, [working, version])
  if (candidates === 0) return null
  if (imaged >= candidates && !working) {
    return <p className="text-small text-mute">All {counted(candidates, 'candidate')} have their pictures by it.</p>
  }
  if (!working) {
    const left = candidates - imaged
    return (
      <Notice tone="alarm">
        {counted(left, 'candidate')} {left === 1 ? 'has' : 'have'} no pictures by version {version}: a cutout can no
        longer be read. Older pictures are shown where there are any; the intake lists the files.
      </Notice>
    )
  }
  return (
    <div className="flex flex-col gap-2">
      <p role="status" className="text-small text-mute">
        Pictures by version {version}: <span className="figures">{imaged.toLocaleString('en')}</span> of{' '}
        {counted(candidates, 'candidate')}. Older pictures are shown until the new ones are there. You may close this
        page; the work goes on.
      </p>
      <ProgressBar label={`Candidates with pictures by version ${version}`} done={imaged} total={candidates} />
    </div>
  )
}
