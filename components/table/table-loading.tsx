/** A table before its rows are there: heading, tools and rows as grey bars where they will stand. */
export function TableLoading({ label }: { label: string }) {
  return (
    <div role="status" aria-label={label} className="flex flex-col gap-3 px-4 py-4 md:h-dvh md:px-6 md:py-5">
      <div className="h-7 w-64 rounded-key bg-raise" />
      <div className="h-4 w-96 max-w-full rounded-key bg-raise" />
      <div className="mt-3 flex justify-end gap-3">
        <div className="h-8 w-20 rounded-control bg-raise" />
        <div className="h-8 w-20 rounded-control bg-raise" />
      </div>
      <div className="flex-1 overflow-hidden rounded-tray border border-line">
        {Array.from({ length: 20 }, (_, index) => (
          <div key={index} className="flex h-row items-center gap-4 border-b border-line px-2">
            <div className="size-7 bg-raise" />
            <div className="h-3 w-44 rounded-key bg-raise" />
            <div className="h-3 flex-1 rounded-key bg-raise/60" />
          </div>
        ))}
      </div>
    </div>
  )
}
