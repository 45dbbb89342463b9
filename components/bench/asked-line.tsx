import type { AskedLook } from '@/lib/work/queue/asked-looks'

/** Who asks for this look, what they say to it, and how many more are asked of the person; nothing of what anybody graded. */
export function AskedLine({ asked, more }: { asked: AskedLook; more: number }) {
  return (
    <div className="flex flex-wrap items-baseline justify-center gap-x-3 px-3 pb-1.5 text-small">
      <span className="[overflow-wrap:anywhere]">
        <span className="font-semibold">{asked.by} asks for your look.</span>
        {asked.note ? <span className="text-mute"> “{asked.note}”</span> : null}
      </span>
      {more > 0 ? <span className="text-note text-mute">{more} more asked of you</span> : null}
    </div>
  )
}
