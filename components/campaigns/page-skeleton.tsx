/** A page to come: its heading, its line below, and rows of content. */
export function PageSkeleton() {
  const bar = 'rounded-control bg-raise motion-safe:animate-pulse'
  return (
    <div role="status" className="mx-auto flex max-w-6xl flex-col gap-8 px-5 py-8 md:px-10">
      <span className="sr-only">Loading…</span>
      <div className="flex flex-col gap-3">
        <div className={`h-9 w-80 max-w-full ${bar}`} />
        <div className={`h-4 w-56 ${bar}`} />
      </div>
      {[0, 1, 2].map((row) => (
        <div key={row} className="flex flex-col gap-3 border-t border-line pt-5">
          <div className={`h-6 w-48 ${bar}`} />
          <div className={`h-16 ${bar}`} />
        </div>
      ))}
    </div>
  )
}
