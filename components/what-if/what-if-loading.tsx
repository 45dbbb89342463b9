/** The page to come: its heading, the four counts, thresholds at the left and plots at the right. */
export function WhatIfLoading() {
  const bar = 'rounded-control bg-raise motion-safe:animate-pulse'
  return (
    <div role="status" className="mx-auto flex max-w-7xl flex-col gap-6 px-5 py-8 md:px-10">
      <span className="sr-only">Loading…</span>
      <div className="flex flex-col gap-3">
        <div className={`h-9 w-80 max-w-full ${bar}`} />
        <div className={`h-4 w-56 ${bar}`} />
      </div>
      <div className={`h-16 ${bar}`} />
      <div className="grid gap-8 lg:grid-cols-[20rem_minmax(0,1fr)]">
        <div className="flex flex-col gap-6">
          {[0, 1, 2, 3].map((row) => (
            <div key={row} className={`h-14 ${bar}`} />
          ))}
        </div>
        <div className={`h-72 ${bar}`} />
      </div>
    </div>
  )
}
