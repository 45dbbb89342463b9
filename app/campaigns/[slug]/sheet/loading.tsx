/** The sheet before its stamps come. */
export default function LoadingSheet() {
  return (
    <div className="night fixed inset-0 flex flex-col bg-bench" role="status" aria-label="The sheet is being laid">
      <div className="h-[3px] bg-raise" />
      <div className="grid grid-cols-[repeat(auto-fill,minmax(5.25rem,1fr))] gap-1.5 overflow-hidden px-3 pt-14 md:grid-cols-[repeat(auto-fill,minmax(6.75rem,1fr))] md:gap-2 md:px-6">
        {Array.from({ length: 60 }, (_, place) => (
          <div key={place} className="aspect-square rounded-tray border border-line bg-black" />
        ))}
      </div>
    </div>
  )
}
