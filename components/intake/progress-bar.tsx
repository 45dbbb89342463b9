/** A thin bar with its meaning in words for everybody who does not see it. */
export function ProgressBar({ label, done, total }: { label: string; done: number; total: number }) {
  const share = total > 0 ? Math.min(1, done / total) : 0
  return (
    <div
      role="progressbar"
      aria-label={label}
      aria-valuemin={0}
      aria-valuemax={100}
      aria-valuenow={Math.round(share * 100)}
      className="h-1 w-full overflow-hidden rounded-full bg-line"
    >
      <div className="h-full bg-lamp transition-[width] duration-200" style={{ width: `${share * 100}%` }} />
    </div>
  )
}
