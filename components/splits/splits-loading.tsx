/** The list, the tray and the ruling bar as grey shapes where they will stand. */
export function SplitsLoading() {
  return (
    <div
      role="status"
      aria-label="The splits are being read"
      className="grid lg:h-dvh lg:grid-cols-[23.5rem_minmax(0,1fr)]"
    >
      <div className="flex flex-col lg:border-r lg:border-line">
        <div className="px-5 pb-4 pt-5">
          <div className="h-7 w-32 rounded-key bg-raise" />
          <div className="mt-2 h-4 w-44 rounded-key bg-raise" />
        </div>
        {Array.from({ length: 6 }, (_, index) => (
          <div key={index} className="flex items-center gap-3 border-t border-line px-5 py-2.5">
            <div className="size-14 rounded-key bg-black" />
            <div className="flex flex-1 flex-col gap-2">
              <div className="h-4 w-40 rounded-key bg-raise" />
              <div className="h-[1.375rem] rounded-key bg-raise" />
            </div>
          </div>
        ))}
      </div>
      <div className="flex flex-col gap-4 px-5 py-5">
        <div className="h-7 w-56 rounded-key bg-raise" />
        <div className="h-4 w-80 max-w-full rounded-key bg-raise" />
        <div className="night aspect-square w-full max-w-xl rounded-tray bg-tray" />
        <div className="mt-auto h-20 rounded-control bg-raise" />
      </div>
    </div>
  )
}
