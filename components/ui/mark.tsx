/** The broken ring: a lensed arc, its counter-image, and the lens. */
export function Mark({ size = 24 }: { size?: number }) {
  return (
    <svg width={size} height={size} viewBox="0 0 24 24" fill="none" aria-hidden="true">
      <path d="M4.2 15.5A8.5 8.5 0 0 1 15.8 4.4" stroke="var(--lamp)" strokeWidth="3" strokeLinecap="round" />
      <path
        d="M20.4 11.2a8.5 8.5 0 0 1-5.2 8.6"
        stroke="var(--lamp)"
        strokeWidth="3"
        strokeLinecap="round"
        opacity=".55"
      />
      <circle cx="12" cy="12" r="2.6" fill="var(--text)" />
    </svg>
  )
}
