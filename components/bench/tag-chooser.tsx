import { KeyCap } from '@/components/ui/key-cap'
import { TAGS, type Tag } from '@/lib/work/grading/tags'
import { ChoiceChips } from './choice-chips'
import { letGo } from './let-go'

export function TagChooser({
  tags,
  open,
  onOpen,
  onToggle,
}: {
  tags: readonly Tag[]
  open: boolean
  onOpen: () => void
  onToggle: (tag: Tag) => void
}) {
  return (
    <section aria-label="Tags">
      <button
        type="button"
        aria-expanded={open}
        onClick={letGo(onOpen)}
        className="hidden min-h-7 items-center gap-2 text-note font-semibold text-mute hover:text-text md:flex short:hidden"
      >
        <KeyCap>T</KeyCap>
        What do you see?
        {open ? <span className="font-normal text-lamp">pick by key</span> : null}
      </button>
      <div className="flex gap-1.5 overflow-x-auto py-1 md:flex-wrap md:overflow-visible short:flex-nowrap short:overflow-x-auto">
        <ChoiceChips choices={TAGS} picked={tags} open={open} onPick={onToggle} />
      </div>
    </section>
  )
}
