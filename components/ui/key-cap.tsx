export function KeyCap({ children }: { children: string }) {
  return (
    <kbd className="figures inline-block min-w-5 rounded-key border border-edge/60 bg-raise px-1.5 text-center text-[0.6875rem] font-semibold leading-4 text-text">
      {children}
    </kbd>
  )
}
