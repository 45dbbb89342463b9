import { KeyCap } from '@/components/ui/key-cap'
import { letGo } from './let-go'
import type { Tool } from './measuring'

export function MeasureButtons({ tool, onTool }: { tool: Tool | null; onTool: (tool: Tool) => void }) {
  return (
    <div role="group" aria-label="Measure" className="flex gap-x-4 short:gap-x-2">
      {(['ruler', 'circle'] as const).map((one) => (
        <button
          key={one}
          type="button"
          aria-pressed={tool === one}
          onClick={letGo(() => onTool(one))}
          className="flex min-h-11 min-w-11 touch-manipulation items-center gap-2 text-note text-mute hover:text-text aria-pressed:font-semibold aria-pressed:text-lamp md:min-h-7"
        >
          <span className="hidden md:inline">
            <KeyCap>{one === 'ruler' ? 'R' : 'O'}</KeyCap>
          </span>
          {one === 'ruler' ? 'Ruler' : 'Circle'}
        </button>
      ))}
    </div>
  )
}
