'use client'

import { useEffect, useState } from 'react'
import { kindOfName } from '@/lib/work/intake/file-name'
import { faultOfFirstBytes } from '@/lib/work/intake/first-bytes'
import type { ChosenFile } from './collect-files'

/** Of more files the rest is looked at on the server only: each takes the browser about a third of a millisecond. */
const MOST_LOOKED_INTO = 5000
const LANES = 8

type Faults = ReadonlyMap<number, string>
const NONE: Faults = new Map()

/** By place in the list, what is wrong with files as their first bytes show; none until all have been looked into. */
export function useFirstBytes(files: ChosenFile[]): Faults {
  const [found, setFound] = useState<{ files: ChosenFile[]; faults: Faults } | null>(null)
  useEffect(() => {
    let gone = false
    const faults = new Map<number, string>()
    const places = files.slice(0, MOST_LOOKED_INTO).flatMap(({ name }, at) => (kindOfName(name) === 'fits' ? at : []))
    const lane = async (): Promise<void> => {
      for (let at = places.pop(); at !== undefined && !gone; at = places.pop()) {
        // A file that cannot be opened any more fails when it is sent, and says so there.
        const fault = await faultOfFirstBytes(files[at].file).catch(() => null)
        if (fault !== null) faults.set(at, fault)
      }
    }
    void Promise.all(Array.from({ length: LANES }, lane)).then(() => void (gone || setFound({ files, faults })))
    return () => void (gone = true)
  }, [files])
  return found?.files === files ? found.faults : NONE
}
