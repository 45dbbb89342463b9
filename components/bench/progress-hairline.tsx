export function ProgressHairline({ given, left }: { given: number; left: number }) {
  const all = given + left
  return (
    <div
      role="progressbar"
      aria-label="Graded by you"
      aria-valuemin={0}
      aria-valuemax={Math.max(1, all)}
      aria-valuenow={given}
      aria-valuetext={`${given} of ${all}`}
      className="h-[3px] bg-raise"
    >
      <div
        className="h-full origin-left bg-lamp transition-transform duration-200"
        style={{ transform: `scaleX(${all === 0 ? 0 : given / all})` }}
      />
    </div>
  )
}
