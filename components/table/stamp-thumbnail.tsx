'use client'

import { useState } from 'react'
import { createPortal } from 'react-dom'

const SIDE = 208
const GAP = 12

/** The middle of a stamp as high as a row; the whole of it, large, beside the pointer while that rests there. */
export function StampThumbnail({ src, name }: { src: string | null; name: string }) {
  const [place, setPlace] = useState<{ left: number; top: number } | null>(null)
  const [broken, setBroken] = useState(false)
  if (!src || broken) {
    const why = broken ? 'The picture could not be loaded' : 'No picture yet'
    return <span className="block size-7 shrink-0 bg-tray" title={why} />
  }
  const show = (box: DOMRect) =>
    setPlace({
      left: Math.min(box.right + GAP, window.innerWidth - SIDE - GAP),
      top: Math.max(GAP, Math.min(box.top - SIDE / 2, window.innerHeight - SIDE - GAP)),
    })
  return (
    <span
      className="block size-7 shrink-0 overflow-hidden bg-tray"
      onPointerEnter={(event) => event.pointerType === 'mouse' && show(event.currentTarget.getBoundingClientRect())}
      onPointerLeave={() => setPlace(null)}
    >
      <img
        src={src}
        alt=""
        width={28}
        height={28}
        loading="lazy"
        decoding="async"
        onError={() => setBroken(true)}
        className="size-7 scale-160 object-contain"
      />
      {place
        ? createPortal(
            <img
              src={src}
              alt={`Stamp of ${name}`}
              style={{ ...place, width: SIDE, height: SIDE }}
              className="pixelated pointer-events-none fixed z-50 rounded-tray border-4 border-tray bg-tray object-contain shadow-xl"
            />,
            document.body,
          )
        : null}
    </span>
  )
}
