'use client'

import { createElement } from 'react'
import type { Keys } from './use-keys'
import { useOnDemand } from './use-on-demand'

const help = () => import('./help-overlay').then(({ HelpOverlay }) => HelpOverlay)
const settings = () => import('./key-settings').then(({ KeySettings }) => KeySettings)

/** The sheets that the first load does without. */
export function BenchSheets({
  sheet,
  keys,
  onSheet,
}: {
  sheet: 'help' | 'settings' | null
  keys: Keys
  onSheet: (sheet: 'help' | 'settings' | null) => void
}) {
  const helpPart = useOnDemand(help, sheet === 'help')
  const settingsPart = useOnDemand(settings, sheet === 'settings')
  const onClose = () => onSheet(null)
  if (sheet === 'help' && helpPart) {
    return createElement(helpPart, { keys, onClose, onChange: () => onSheet('settings') })
  }
  if (sheet === 'settings' && settingsPart) return createElement(settingsPart, { keys, onClose })
  return null
}
