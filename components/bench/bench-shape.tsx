/** The bench before its candidate comes: stamp, slides and ladder as empty places. */
export function BenchShape() {
  return (
    <div className="night fixed inset-0 flex flex-col bg-bench" role="status" aria-label="The bench is being laid">
      <div className="h-[3px] bg-raise" />
      <div className="flex min-h-0 flex-1 flex-col md:grid md:grid-cols-[minmax(0,1fr)_18.5rem]">
        <div className="flex min-h-0 flex-1 flex-col pt-24">
          <div className="grid min-h-0 flex-1 place-items-center [container-type:size]">
            <div className="aspect-square w-[min(90cqw,92cqh)] bg-black outline outline-line" />
          </div>
          <div className="flex justify-center gap-2.5 py-5">
            {[1, 2, 3, 4, 5].map((slide) => (
              <div key={slide} className="size-16 rounded-key border border-line bg-black" />
            ))}
          </div>
        </div>
        <div className="grid grid-cols-5 content-start gap-1.5 px-3 pb-3 md:grid-cols-1 md:gap-0 md:border-l md:border-line md:px-5 md:pt-12">
          {['A', 'B', 'C', 'N', 'U'].map((letter) => (
            <div
              key={letter}
              className="h-16 rounded-control border border-line md:rounded-none md:border-x-0 md:border-b-0"
            />
          ))}
        </div>
      </div>
    </div>
  )
}
