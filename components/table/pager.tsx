import { ToolButton } from './tool-button'

interface PagerProps {
  /** from 0 */
  page: number
  pageSize: number
  count: number
  onChange: (page: number) => void
}

/** Nothing where everything fits one page. */
export function Pager({ page, pageSize, count, onChange }: PagerProps) {
  const pages = Math.ceil(count / pageSize)
  if (pages <= 1 && page === 0) return null
  const first = Math.min(page * pageSize + 1, count)
  const last = Math.min((page + 1) * pageSize, count)
  const show = (number: number) => number.toLocaleString('en')
  return (
    <nav aria-label="Pages of the table" className="flex items-center gap-2 text-small text-mute">
      <ToolButton disabled={page === 0} onClick={() => onChange(0)}>
        First
      </ToolButton>
      <ToolButton disabled={page === 0} onClick={() => onChange(Math.min(page, pages) - 1)}>
        Previous
      </ToolButton>
      <span className="figures px-1">
        {page < pages ? `${show(first)}–${show(last)} of ${show(count)}` : `beyond the last of ${show(count)}`}
      </span>
      <ToolButton disabled={page >= pages - 1} onClick={() => onChange(page + 1)}>
        Next
      </ToolButton>
      <ToolButton disabled={page >= pages - 1} onClick={() => onChange(pages - 1)}>
        Last
      </ToolButton>
    </nav>
  )
}
