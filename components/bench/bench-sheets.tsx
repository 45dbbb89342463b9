'use client'

import { createElement } from 'react'
import type { useBench } from './use-bench'
import type { Keys } from './use-keys'
import { useOnDemand } from './use-on-demand'

const help = () => import('./help-overlay').then(({ HelpOverlay }) => HelpOverlay)
const settings = () => import('./key-settings').then(({ KeySettings }) => KeySettings)
const refused = () => import('./refused-grades').then(({ RefusedGrades }) => RefusedGrades)

/** The sheets that the first load does without. */
export function BenchSheets({ bench, keys }: { bench: ReturnType<typeof useBench>; keys: Keys }) {
  const { sheet, setSheet } = bench
  const helpPart = useOnDemand(help, sheet === 'help')
  const settingsPart = useOnDemand(settings, sheet === 'settings')
  const refusedPart = useOnDemand(refused, sheet === 'refused')
  const onClose = () => setSheet(null)
  if (sheet === 'help' && helpPart) {
    return createElement(helpPart, { keys, onClose, onChange: () => setSheet('settings') })
  }
  if (sheet === 'settings' && settingsPart) return createElement(settingsPart, { keys, onClose })
  if (sheet === 'refused' && refusedPart) {
    const { dismiss, sendAgain, snapshot } = bench
    return createElement(refusedPart, {
      refused: snapshot.refused,
      onClose,
      onDismiss: (id) => {
        dismiss(id)
        if (snapshot.refused.length <= 1) onClose()
      },
      onSendAgain: (id) => {
        sendAgain(id)
        if (snapshot.refused.length <= 1) onClose()
      },
    })
  }
  return null
}
