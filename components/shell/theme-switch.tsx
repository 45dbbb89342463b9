'use client'

import { Moon, Sun } from 'lucide-react'
import { useTheme } from 'next-themes'
import { useSyncExternalStore } from 'react'

const never = () => () => {}

/** Night bench or day bench. Until someone chooses, the system's preference holds. */
export function ThemeSwitch() {
  const { resolvedTheme, setTheme } = useTheme()
  const mounted = useSyncExternalStore(
    never,
    () => true,
    () => false,
  )
  const night = !mounted || resolvedTheme !== 'light'
  const label = night ? 'Switch to the day theme' : 'Switch to the night theme'
  return (
    <button
      type="button"
      aria-label={label}
      title={label}
      onClick={() => setTheme(night ? 'light' : 'dark')}
      className="grid size-9 place-items-center rounded-control text-mute hover:bg-raise hover:text-text"
    >
      {night ? <Sun size={17} aria-hidden="true" /> : <Moon size={17} aria-hidden="true" />}
    </button>
  )
}
