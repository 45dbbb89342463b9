/** Name, tray and columns of a candidate as grey shapes where they will stand. */
export function EvidenceLoading() {
  return (
    <div
      role="status"
      aria-label="The evidence is being read"
      className="mx-auto flex max-w-6xl flex-col gap-6 px-4 py-5 md:px-8 md:py-6"
    >
      <div className="h-4 w-28 rounded-key bg-raise" />
      <div className="h-9 w-72 max-w-full rounded-key bg-raise" />
      <div className="grid gap-8 lg:grid-cols-[minmax(0,1fr)_22rem]">
        <div className="night aspect-[1.15] rounded-tray bg-tray" />
        <div className="flex flex-col gap-4">
          {Array.from({ length: 7 }, (_, index) => (
            <div key={index} className="h-10 rounded-key bg-raise" />
          ))}
        </div>
      </div>
    </div>
  )
}
