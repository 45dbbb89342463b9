import { CircleAlert, CircleCheck, CircleDashed, Copy, FileCheck2, type LucideIcon } from 'lucide-react'
import type { FileFate } from '@/db/schema/intake'

const LOOK: Record<FileFate, { icon: LucideIcon; tone: string }> = {
  stored: { icon: CircleDashed, tone: 'text-mute' },
  read: { icon: FileCheck2, tone: 'text-text' },
  imaged: { icon: CircleCheck, tone: 'text-text' },
  duplicate: { icon: Copy, tone: 'text-mute' },
  refused: { icon: CircleAlert, tone: 'text-alarm' },
}

/** A file's fate as its word and a shape of its own: colour is not needed to tell them apart. */
export function FateMark({ fate }: { fate: FileFate }) {
  const { icon: Icon, tone } = LOOK[fate]
  return (
    <span className={`inline-flex items-center gap-1.5 whitespace-nowrap text-small ${tone}`}>
      <Icon size={15} aria-hidden="true" />
      {fate}
    </span>
  )
}
